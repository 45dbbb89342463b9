import { describe, expect, it } from 'vitest'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { matchScales } from './match-scales'
import type { BandPlane } from './normalise-planes'

/** The same Gaussian of 1 arcsec on the sky, 1.2 arcsec right of and 0.8 above the middle, total flux 1000. */
function seen(band: string, side: number, scale: number | null): BandPlane {
  const pixel = scale ?? 0.2
  const data = Float32Array.from({ length: side * side }, (_, i) => {
    const x = ((i % side) - (side - 1) / 2) * pixel - 1.2
    const y = (Math.floor(i / side) - (side - 1) / 2) * pixel - 0.8
    return ((1000 * pixel * pixel) / (2 * Math.PI)) * Math.exp(-(x * x + y * y) / 2)
  })
  return { band, width: side, height: side, data, pixelScaleArcsec: scale }
}

const total = (data: Float32Array) => data.reduce((sum, value) => sum + (value === value ? value : 0), 0)

describe('bands of different pixel scales', () => {
  it.each([
    [0.26, 70],
    [0.333, 50],
    [0.4, 45],
  ])('of %s arcsec are brought to the finest grid, with the light where it is and as much of it', (scale, side) => {
    const fine = seen('g', 80, 0.2)
    const { planes, note, unmatched } = matchScales([fine, seen('r', side, scale)])
    expect(planes[0]).toBe(fine)
    expect(planes[1]).toMatchObject({ band: 'r', width: 80, height: 80, pixelScaleArcsec: 0.2 })
    expect(note).toBe('Resampled to the 0.2 arcsec pixels of g: r.')
    expect(unmatched).toEqual([])
    expect(Math.abs(total(planes[1].data) / total(fine.data) - 1)).toBeLessThan(0.01)
    // Interpolation blurs: the peak of a source of 5 pixels falls by at most 5 %.
    planes[1].data.forEach((value, i) => expect(Math.abs(value - fine.data[i])).toBeLessThan(0.33))
  })

  it('have no data where the smaller cutout ends', () => {
    const { planes } = matchScales([seen('g', 80, 0.2), seen('r', 40, 0.26)])
    expect(planes[1].data[0]).toBeNaN()
    expect(planes[1].data[40 * 80 + 40]).not.toBeNaN()
  })

  it('that have one size but differ in scale are told apart', () => {
    const { planes, note } = matchScales([seen('g', 60, 0.2), seen('r', 60, 0.25)])
    expect(note).toContain('r.')
    planes[1].data.forEach((value, i) => {
      if (value === value) expect(Math.abs(value - planes[0].data[i])).toBeLessThan(0.33)
    })
  })

  it('come back as they are when they agree, or when no scale is known', () => {
    const same = [seen('g', 80, 0.2), seen('r', 80, 0.2004)]
    expect(matchScales(same)).toEqual({ planes: same, note: null, unmatched: [] })
    const unknown = [seen('g', 80, null), seen('r', 60, null)]
    expect(matchScales(unknown)).toEqual({ planes: unknown, note: null, unmatched: [] })
  })

  it('are named when one has another size and no scale', () => {
    const { planes, unmatched } = matchScales([seen('g', 80, 0.2), seen('r', 60, null)])
    expect(unmatched).toEqual(['r'])
    expect(planes[1].width).toBe(60)
  })

  // 2 by 2 pixels added up hold four times the light and, being independent, twice the noise; per pixel of the finer grid that
  // is the light and the noise of the finer band.
  it('count by the noise that independent pixels of their own would have, whatever the grid', () => {
    const random = new SeededRandom(3)
    const side = 80
    const fine = Float32Array.from({ length: side * side }, () => 5 + 2 * random.normal())
    const coarse = new Float32Array((side * side) / 4)
    fine.forEach((value, i) => {
      const [x, y] = [i % side, Math.floor(i / side)]
      coarse[(y >> 1) * (side / 2) + (x >> 1)] += value
    })
    const { planes } = matchScales([
      { band: 'g', width: side, height: side, data: fine, pixelScaleArcsec: 0.2 },
      { band: 'r', width: side / 2, height: side / 2, data: coarse, pixelScaleArcsec: 0.4 },
    ])
    expect(planes[1].sky?.sigma).toBeGreaterThan(1.8)
    expect(planes[1].sky?.sigma).toBeLessThan(2.2)
    expect(planes[1].sky?.background).toBeCloseTo(5, 0)
  })
})
