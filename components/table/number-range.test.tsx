import { expect, it } from 'vitest'
import { parseNumberRange } from './number-range'

const within = (text: string, value: number) => {
  const range = parseNumberRange(text)
  if (!range) return null
  const fromBelow = range.above ? value > range.least : value >= range.least
  return fromBelow && (range.below ? value < range.most : value <= range.most)
}

it.each([
  ['2..3', 2, true],
  ['2..3', 3.01, false],
  ['..3', -7, true],
  ['2 to 3', 2.5, true],
  ['2..', 99, true],
  ['>2', 2, false],
  ['>=2', 2, true],
  ['≥ 2', 2, true],
  ['< 2', 2, false],
  ['<=2', 2, true],
  ['-12..−10', -11, true],
  ['2.5', 2.45, true],
  ['2.5', 2.55, false],
  ['4', 4.4, true],
  ['4', 4.5, false],
  ['< 1e-3', 0.0009, true],
  ['1e-3', 0.0016, false],
  ['1.0E2', 104, true],
  ['3..2', 2.5, false],
])('reads "%s": %d is in it: %s', (text, value, expected) => {
  expect(within(text, value)).toBe(expected)
})

it.each(['', 'abc', '..', '2..x', '>', 'e5', '1 2'])('does not take "%s" for a range', (text) => {
  expect(parseNumberRange(text)).toBeNull()
})
