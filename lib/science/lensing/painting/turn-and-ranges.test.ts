import { describe, expect, it } from 'vitest'
import { faultsOfRanges, USUAL_RANGES } from './painting-ranges'
import { turnPixels } from './turn-pixels'

/** Two columns, three rows; the bottom row first. */
const PICTURE = { width: 2, height: 3, data: Float32Array.of(1, 2, 3, 4, 5, 6) }
const rows = ({ width, data }: { width: number; data: Float32Array }) =>
  Array.from({ length: data.length / width }, (_, k) => [...data.subarray(k * width, (k + 1) * width)])

describe('turning a picture', () => {
  it('takes the bottom row to the right side by a quarter counter-clockwise', () => {
    expect(rows(turnPixels(PICTURE, 1))).toEqual([
      [5, 3, 1],
      [6, 4, 2],
    ])
  })

  it('by two quarters puts it upside down, mirrored puts left to right', () => {
    expect(rows(turnPixels(PICTURE, 2))).toEqual([
      [6, 5],
      [4, 3],
      [2, 1],
    ])
    expect(rows(turnPixels(PICTURE, 4))).toEqual([
      [2, 1],
      [4, 3],
      [6, 5],
    ])
  })

  it('shows eight different pictures, and four quarters come back to the first', () => {
    const all = Array.from({ length: 8 }, (_, turned) => JSON.stringify(rows(turnPixels(PICTURE, turned))))
    expect(new Set(all).size).toBe(8)
    expect(turnPixels(turnPixels(PICTURE, 1), 3)).toEqual(PICTURE)
    expect(turnPixels(turnPixels(PICTURE, 6), 6)).toEqual(PICTURE)
  })

  it('refuses other turns', () => {
    expect(() => turnPixels(PICTURE, 8)).toThrow(RangeError)
    expect(() => turnPixels(PICTURE, 0.5)).toThrow('A turn is 0 to 7')
  })
})

describe('ranges to paint from', () => {
  it('are good as they come', () => {
    expect(faultsOfRanges(USUAL_RANGES)).toEqual([])
  })

  it('are named where they lie outside or run backwards', () => {
    const faults = faultsOfRanges({ ...USUAL_RANGES, einsteinRadiusArcsec: [2, 1], sersicIndex: [0.1, 2] })
    expect(faults.map(({ name }) => name)).toEqual(['einsteinRadiusArcsec', 'sersicIndex'])
    expect(faultsOfRanges({ ...USUAL_RANGES, shearStrength: [Number.NaN, 0.1] })).toHaveLength(1)
  })
})
