// The points that a live trace keeps: bounded, evenly thinned, newest always there.

export interface Trace {
  x: number[]
  series: number[][]
}

export function emptyTrace(series: number): Trace {
  return { x: [], series: Array.from({ length: series }, () => []) }
}

/** Adds a point; when the trace is full every second older point goes. A point with the x of the last one replaces it. */
export function addPoint(trace: Trace, x: number, values: number[], most = 600): Trace {
  const last = trace.x.at(-1)
  if (last !== undefined && x < last) return trace
  const keep = last === x ? trace.x.length - 1 : trace.x.length
  const thin = keep + 1 > most
  const pick = (a: number[]) => (thin ? a.slice(0, keep).filter((_, i) => i % 2 === 0) : a.slice(0, keep))
  return {
    x: [...pick(trace.x), x],
    series: trace.series.map((s, k) => [...pick(s), values[k] ?? Number.NaN]),
  }
}
