// What the page knows: the searches, which one is open, and the traces of those that run.

import { listJobs, openEvents, Problem } from './api'
import { addPoint, emptyTrace, type Trace } from './trace'
import type { Job } from './types'

class Session {
  jobs = $state.raw<Job[]>([])
  openId = $state<string | undefined>()
  connected = $state(true)
  problem = $state<string | undefined>()
  traces = $state.raw<Record<string, Trace>>({})

  open = $derived(this.jobs.find((j) => j.id === this.openId))

  /** Loads the list and follows the event stream until the returned function is called. */
  start(): () => void {
    void this.reload()
    return openEvents(
      (job) => this.receive(job),
      (connected) => {
        if (connected && !this.connected) void this.reload()
        this.connected = connected
      },
    )
  }

  async reload(): Promise<void> {
    try {
      const { jobs } = await listJobs()
      this.jobs = jobs ?? []
      this.openId ??= this.jobs[0]?.id
      this.problem = undefined
    } catch (error) {
      this.problem = error instanceof Problem ? error.message : String(error)
    }
  }

  receive(job: Job): void {
    const at = this.jobs.findIndex((j) => j.id === job.id)
    this.jobs = at < 0 ? [job, ...this.jobs] : this.jobs.with(at, job)
    this.openId ??= job.id
    const { quenches, minima, energy_kcal_mol, temperature_k } = job.progress
    if (quenches === 0 || job.state !== 'running') return
    const trace = this.traces[job.id] ?? emptyTrace(3)
    this.traces = { ...this.traces, [job.id]: addPoint(trace, quenches, [minima, energy_kcal_mol, temperature_k]) }
  }
}

export const session = new Session()
