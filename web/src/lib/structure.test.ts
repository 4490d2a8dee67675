import { expect, it } from 'vitest'
import { xyzText } from './structure'

it('writes count, title and one row per atom', () => {
  const text = xyzText('water\nquenched', ['O', 'H', 'H'], [
    [0, 0, 0],
    [0.9691, 0, 0],
    [-0.2338, 0.9405, 0],
  ])
  const lines = text.split('\n')
  expect(lines[0]).toBe('3')
  expect(lines[1]).toBe('water quenched')
  expect(lines[3]).toBe('H 0.969100 0.000000 0.000000')
})
