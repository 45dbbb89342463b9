import { describe, expect, it } from 'vitest'
import { SeededRandom } from '../seeded-random'
import { pointSpread } from '../simulator/point-spread'
import { seeingOf, starWidthPixels, usualSeeingArcsec } from './seeing'

const SIDE = 80
const MIDDLE = { x: 40, y: 40 }

/** Sky of noise 1 with things of a width in arcsec at places, each of a flux; pixels of 0.2 arcsec. */
function picture(things: { x: number; y: number; fwhm: number; flux: number; beta?: number }[]) {
  const random = new SeededRandom(7)
  const data = Float32Array.from({ length: SIDE * SIDE }, () => random.normal())
  for (const { x, y, fwhm, flux, beta = Number.POSITIVE_INFINITY } of things) {
    const profile = pointSpread({ band: 'r', seeingArcsec: fwhm, moffatBeta: beta, skyNoise: 1, electronsPerFlux: 1 })
    for (let i = 0; i < data.length; i++) {
      const distance = Math.hypot((i % SIDE) - x, Math.floor(i / SIDE) - y) * 0.2
      data[i] += flux * 0.04 * profile(distance)
    }
  }
  return { band: 'r', width: SIDE, height: SIDE, data, pixelScaleArcsec: 0.2, header: {} }
}

const GALAXY = { ...MIDDLE, fwhm: 1.6, flux: 6000 }
const STARS = [
  { x: 15.3, y: 20.1, fwhm: 0.9, flux: 4000 },
  { x: 64.2, y: 61.7, fwhm: 0.9, flux: 2500 },
]

describe('the seeing of a cutout', () => {
  it('is that of its stars', () => {
    const found = seeingOf(picture([GALAXY, ...STARS]), MIDDLE)
    expect(found.from).toBe('stars')
    expect(Math.abs(found.arcsec / 0.9 - 1)).toBeLessThan(0.06)
  })

  it('is that of stars with the wings of a Moffat profile too', () => {
    const stars = STARS.map((star) => ({ ...star, beta: 3.5 }))
    expect(Math.abs(seeingOf(picture([GALAXY, ...stars]), MIDDLE).arcsec / 0.9 - 1)).toBeLessThan(0.06)
  })

  it('is not taken from one thing alone, from faint things or from things that differ', () => {
    expect(starWidthPixels(picture([GALAXY, STARS[0]]), MIDDLE)).toBeNull()
    expect(starWidthPixels(picture([GALAXY, ...STARS.map((star) => ({ ...star, flux: 80 }))]), MIDDLE)).toBeNull()
    expect(starWidthPixels(picture([GALAXY, STARS[0], { ...STARS[1], fwhm: 1.5 }]), MIDDLE)).toBeNull()
    expect(starWidthPixels(picture([]), MIDDLE)).toBeNull()
  })

  it('is what the header says where there are no stars, in arcsec that may be', () => {
    const plane = picture([GALAXY])
    expect(seeingOf({ ...plane, header: { SEEING: 0.68 } }, MIDDLE)).toEqual({ arcsec: 0.68, from: 'header' })
    expect(seeingOf({ ...plane, header: { SEEING: 'good', FWHM: 40 } }, MIDDLE).from).toBe('usual')
  })

  // 0.8 arcsec at 625 nm times (480 / 625)^-0.2 (Fried 1966).
  it('is a usual one for the band else, and never wider than the core of the galaxy', () => {
    expect(seeingOf(picture([GALAXY]), MIDDLE)).toEqual({ arcsec: 0.8, from: 'usual' })
    expect(usualSeeingArcsec('g')).toBeCloseTo(0.8434, 3)
    const sharp = seeingOf(picture([{ ...GALAXY, fwhm: 0.6 }]), MIDDLE)
    expect(sharp.from).toBe('core')
    // These pixels hold the brightness at their middles and not over their areas.
    expect(Math.abs(sharp.arcsec / 0.6 - 1)).toBeLessThan(0.08)
  })
})
