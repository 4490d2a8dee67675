import { describe, expect, it } from 'vitest'
import { count, duration, fixed, formulaParts, percent } from './format'

describe('fixed', () => {
  it('writes a true minus sign and no negative zero', () => {
    expect(fixed(-1.234, 2)).toBe('−1.23')
    expect(fixed(-0.001, 2)).toBe('0.00')
  })
  it('shows a missing value as a dash, not as zero', () => {
    expect(fixed(undefined, 2)).toBe('–')
    expect(fixed(Number.NaN, 2)).toBe('–')
  })
})

describe('percent', () => {
  it('never rounds a small population to nothing', () => {
    expect(percent(0.0001)).toBe('< 0.05 %')
    expect(percent(0)).toBe('0.0 %')
    expect(percent(0.654)).toBe('65.4 %')
  })
})

describe('duration', () => {
  it('picks the unit', () => {
    expect(duration(12.4)).toBe('12 s')
    expect(duration(95)).toBe('1 min 35 s')
    expect(duration(7260)).toBe('2 h 1 min')
    expect(duration(-1)).toBe('–')
  })
})

describe('count', () => {
  it('groups thousands by a narrow space', () => {
    expect(count(12345)).toBe('12\u202f345')
  })
})

describe('formulaParts', () => {
  it('puts digits below the line', () => {
    expect(formulaParts('C16H30O')).toEqual([
      { text: 'C', sub: false },
      { text: '16', sub: true },
      { text: 'H', sub: false },
      { text: '30', sub: true },
      { text: 'O', sub: false },
    ])
  })
})
