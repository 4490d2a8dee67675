import type { Job, JobRequest, MinimaPage, MoleculeInput, MoleculeReport } from './types'

const BASE = '/api/v1'

interface ProblemDocument {
  title?: string
  detail?: string
  status?: number
  errors?: { message?: string; location?: string; value?: unknown }[]
}

/** An answer of the server that is no success, in words meant for the user (RFC 9457). */
export class Problem extends Error {
  constructor(
    readonly status: number,
    message: string,
    readonly hints: string[] = [],
    /** SMILES of which the user may choose one: stereoisomers or the parts of a mixture. */
    readonly choices: string[] = [],
  ) {
    super(message)
  }
}

async function request<T>(method: string, path: string, body?: unknown): Promise<T> {
  const init: RequestInit = { method, headers: { Accept: 'application/json, application/problem+json' } }
  if (body !== undefined) {
    init.body = JSON.stringify(body)
    init.headers = { ...init.headers, 'Content-Type': 'application/json' }
  }
  let answer: Response
  try {
    answer = await fetch(BASE + path, init)
  } catch {
    throw new Problem(0, 'The server does not answer. Is `tarn serve` still running?')
  }
  if (!answer.ok) throw await problemOf(answer)
  return answer.status === 204 ? (undefined as T) : ((await answer.json()) as T)
}

async function problemOf(answer: Response): Promise<Problem> {
  const document = (await answer.json().catch(() => ({}))) as ProblemDocument
  const detail = document.detail ?? document.title ?? `The server answered ${answer.status}.`
  const errors = document.errors ?? []
  const choices = errors.flatMap((e) => (e.location === 'body.molecule' && typeof e.value === 'string' ? [e.value] : []))
  const hints = errors.flatMap((e) => (e.message && !detail.includes(e.message) && !choices.includes(e.message) ? [e.message] : []))
  return new Problem(answer.status, detail, hints, choices)
}

export const checkMolecule = (molecule: MoleculeInput) => request<MoleculeReport>('POST', '/molecules', molecule)
export const submitJob = (job: JobRequest) => request<Job>('POST', '/jobs', job)
export const listJobs = () => request<{ jobs: Job[] }>('GET', '/jobs?limit=100')
export const jobAction = (id: string, action: 'pause' | 'resume' | 'cancel') =>
  request<Job>('POST', `/jobs/${encodeURIComponent(id)}/${action}`)

export interface MinimaQuery {
  key: string
  field: string
  temperatureK: number
  windowKcalMol: number
}

export function minimaPath(q: MinimaQuery, format?: 'sdf' | 'xyz' | 'csv' | 'json'): string {
  const query = new URLSearchParams({
    field: q.field,
    temperature_k: String(q.temperatureK),
    window: String(q.windowKcalMol),
  })
  if (format) query.set('format', format)
  return `/molecules/${encodeURIComponent(q.key)}/minima?${query}`
}

export const downloadUrl = (q: MinimaQuery, format: 'sdf' | 'xyz' | 'csv' | 'json') => BASE + minimaPath(q, format)
export const listMinima = (q: MinimaQuery) => request<MinimaPage>('GET', minimaPath(q))

/** One stream for the whole page: browsers allow only six connections to a host. */
export function openEvents(onJob: (job: Job) => void, onState: (connected: boolean) => void): () => void {
  const source = new EventSource(`${BASE}/events`)
  source.onopen = () => onState(true)
  source.onerror = () => onState(false)
  source.addEventListener('job', (e) => onJob(JSON.parse((e as MessageEvent<string>).data) as Job))
  return () => source.close()
}
