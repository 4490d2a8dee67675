import { expect, it } from 'vitest'
import { addPoint, emptyTrace } from './trace'

it('stays bounded and keeps the first and the newest point', () => {
  let trace = emptyTrace(1)
  for (let i = 0; i < 5000; i++) trace = addPoint(trace, i, [i * 2], 100)
  expect(trace.x.length).toBeLessThanOrEqual(100)
  expect(trace.x[0]).toBe(0)
  expect(trace.x.at(-1)).toBe(4999)
  expect(trace.series[0]?.at(-1)).toBe(9998)
})

it('replaces the last point when its x comes again and ignores the past', () => {
  let trace = addPoint(emptyTrace(1), 1, [5])
  trace = addPoint(trace, 1, [6])
  trace = addPoint(trace, 0, [7])
  expect(trace).toEqual({ x: [1], series: [[6]] })
})
