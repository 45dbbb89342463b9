import { expect, it } from 'vitest'
import { closeFactor } from './close-field'

it('shows 80 pixels of 0.3 arcsec, 24 arcsec, twice as large in a field of 12', () => {
  expect(closeFactor(80, 0.3, 12)).toBeCloseTo(2, 12)
})

it('leaves a picture whole that is no larger than the field', () => {
  expect(closeFactor(40, 0.2, 12)).toBe(1)
})

it('knows only the whole picture without a scale or a size', () => {
  expect([closeFactor(80, null, 12), closeFactor(80, 0, 12), closeFactor(0, 0.2, 12)]).toEqual([1, 1, 1])
  expect([closeFactor(80, Number.NaN, 12), closeFactor(80, 0.2, Number.NaN)]).toEqual([1, 1])
})
