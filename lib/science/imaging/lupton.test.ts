import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { readFixture, readReference } from './_fits-fixture'
import { luptonFromLimits, luptonRgb } from './lupton'

interface Reference {
  lupton: {
    rows: {
      minimum: number | [number, number, number]
      stretch: number
      Q: number
      file: string
      own_implementation_pixels_that_differ: number
      sum_rgb: [number, number, number]
    }[]
  }
}

const { lupton } = readReference<Reference>()
const [g, r, i] = readFixture('cube_gri.fits').planes

// astropy 5.2.1 make_lupton_rgb on doubles; Lupton et al. 2004, PASP 116, 133. Counts are truncated, so a value within
// rounding of a whole number may fall to either side: one count is allowed, on no more pixels than the fixture's own
// second implementation needed.
describe('the colour composite of Lupton et al.', () => {
  it.each(lupton.rows)('equals astropy for minimum $minimum, stretch $stretch, Q $Q', (row) => {
    const expected = readFixture(row.file.replace('stretch/', '').replace(/ .*/, '')).planes
    const pixels = luptonRgb(i, r, g, { minimum: row.minimum, stretch: row.stretch, Q: row.Q })
    let different = 0
    for (let pixel = 0; pixel < i.length; pixel++) {
      for (let channel = 0; channel < 3; channel++) {
        const distance = Math.abs(pixels[3 * pixel + channel] - expected[channel][pixel])
        expect(distance).toBeLessThanOrEqual(1)
        different += distance
      }
    }
    expect(different).toBeLessThanOrEqual(Math.max(3, 3 * row.own_implementation_pixels_that_differ))
  })

  it('keeps the ratios of the channels below saturation and in it', () => {
    const faint = luptonRgb([4], [2], [1], { stretch: 5, Q: 8 })
    expect(faint[0] / faint[2]).toBeCloseTo(4, 0)
    const saturated = luptonRgb([4e6], [2e6], [1e6], { stretch: 5, Q: 8 })
    expect(saturated[0]).toBeGreaterThanOrEqual(254)
    expect(saturated[1]).toBe(127)
    expect(saturated[2]).toBe(63)
  })

  it('makes black what is not above the minimum or not finite', () => {
    const values = [0, -5, Number.NaN, Number.POSITIVE_INFINITY]
    expect([...luptonRgb(values, values, values)]).toEqual(new Array(12).fill(0))
    expect([...luptonRgb([Number.NaN], [1], [1])]).toEqual([0, 0, 0])
  })

  it('refuses channels of different sizes and a stretch that is not above 0', () => {
    expect(() => luptonRgb([1, 2], [1], [1])).toThrow('The channels differ in size (2, 1, 1 pixels).')
    expect(() => luptonRgb([1], [1], [1], { stretch: 0 })).toThrow('The stretch must be above 0')
  })

  it('reaches white at the white it is asked for', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 2, max: 1e5, noNaN: true }),
        fc.double({ min: 0.1, max: 50, noNaN: true }),
        (white, softening) => {
          const limits = luptonFromLimits(white, softening)
          const [below] = luptonRgb([0.98 * white], [0.98 * white], [0.98 * white], limits)
          const [at] = luptonRgb([1.001 * white], [1.001 * white], [1.001 * white], limits)
          expect(at).toBeGreaterThanOrEqual(254)
          expect(below).toBeLessThan(255)
        },
      ),
    )
  })
})
