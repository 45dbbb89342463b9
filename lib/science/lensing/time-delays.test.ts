import { describe, expect, it } from 'vitest'
import { readReference, relativeError } from './_reference'
import { CONCORDANCE, PLANCK_2018 } from './cosmology'
import { lensModel } from './sie-shear'
import { pointImages } from './sie-shear-images'
import { arrivalTimeArcsec2, arrivalTimeSurface, daysPerSquareArcsec, delayedImages } from './time-delays'

interface Reference {
  sis_einstein_radius_and_mass: {
    rows: { z_l: number; z_s: number; D_l_mpc: number; D_s_mpc: number; D_ls_mpc: number; theta_E_arcsec: number }[]
  }
}
const { rows } = readReference<Reference>('lensing').sis_einstein_radius_and_mass

describe('the delay between the images of a sphere', () => {
  // (1 + z_l) D_l D_s / (c D_ls) (x1^2 - x2^2) / 2 with the distances that astropy 5.2.1 gives (fixtures/lensing), ten digits;
  // c, the parsec and the arcsecond are exact.
  it.each(rows)('is the closed form at z $z_l and $z_s', ({ z_l, z_s, D_l_mpc, D_s_mpc, D_ls_mpc, theta_E_arcsec }) => {
    const model = lensModel({ einsteinRadiusArcsec: theta_E_arcsec, axisRatio: 1, positionAngleDeg: 0 })
    const source = { east: 0.18 * theta_E_arcsec, north: -0.24 * theta_E_arcsec }
    const scale = daysPerSquareArcsec(CONCORDANCE, z_l, z_s)
    const images = delayedImages(model, source, pointImages(model, source), scale)
    const [far, near] = [1.3 * theta_E_arcsec, 0.7 * theta_E_arcsec]
    const distanceM = ((D_l_mpc * D_s_mpc) / D_ls_mpc) * 3.0856775814913673e22
    const arcsec = Math.PI / 648000
    const seconds = (((1 + z_l) * distanceM) / 299792458) * ((far ** 2 - near ** 2) / 2) * arcsec ** 2
    expect(images.map(({ kind }) => kind)).toEqual(['minimum', 'saddle'])
    expect(Math.hypot(images[0].east, images[0].north)).toBeCloseTo(far, 9)
    expect(images[0].delayDays).toBe(0)
    expect(relativeError(images[1].delayDays, seconds / 86400)).toBeLessThan(1e-8)
  })

  it('grows with the square of the angles: a cluster keeps its images years apart', () => {
    const delay = (radius: number) => {
      const model = lensModel({ einsteinRadiusArcsec: radius, axisRatio: 1, positionAngleDeg: 0 })
      const source = { east: 0.2 * radius, north: 0 }
      return delayedImages(model, source, pointImages(model, source), daysPerSquareArcsec(PLANCK_2018, 0.4, 2))[1]
        .delayDays
    }
    expect(delay(20) / delay(1)).toBeCloseTo(400, 6)
    expect(delay(20)).toBeGreaterThan(3 * 365)
  })

  it('goes as 1 / H0', () => {
    const half = { ...CONCORDANCE, hubble: 35 }
    expect(daysPerSquareArcsec(half, 0.5, 2) / daysPerSquareArcsec(CONCORDANCE, 0.5, 2)).toBeCloseTo(2, 10)
  })

  it('is not a number without usable redshifts', () => {
    for (const [lens, source] of [
      [0.5, 0.5],
      [0.5, 0.3],
      [0, 1],
      [NaN, 1],
      [0.5, NaN],
      [-0.1, 1],
    ]) {
      expect(daysPerSquareArcsec(CONCORDANCE, lens, source)).toBeNaN()
    }
  })
})

describe('the arrival-time surface', () => {
  const model = lensModel({
    einsteinRadiusArcsec: 1.1,
    axisRatio: 0.7,
    positionAngleDeg: 40,
    shear: { strength: 0.06, positionAngleDeg: 120 },
  })
  const source = { east: 0.06, north: 0.03 }
  const images = delayedImages(model, source, pointImages(model, source), 1)

  // Fermat's principle: at an image the surface is flat, a minimum or a saddle as its sign says. No outside source needed.
  it('is flat at the images, lower all round at a minimum and not at a saddle', () => {
    expect(images.length).toBe(4)
    const h = 1e-3
    for (const image of images) {
      const here = arrivalTimeArcsec2(model, source, image)
      const around = Array.from({ length: 36 }, (_, k) => {
        const angle = (k * Math.PI) / 18
        const at = { east: image.east + h * Math.sin(angle), north: image.north + h * Math.cos(angle) }
        return arrivalTimeArcsec2(model, source, at) - here
      })
      for (const difference of around) expect(Math.abs(difference)).toBeLessThan(2 * h * h)
      if (image.kind === 'minimum') expect(Math.min(...around)).toBeGreaterThan(0)
      else expect([Math.min(...around) < 0, Math.max(...around) > 0]).toEqual([true, true])
    }
  })

  it('lets a minimum arrive first and both minima before the saddles of a quad', () => {
    expect(images.map(({ kind }) => kind)).toEqual(['minimum', 'minimum', 'saddle', 'saddle'])
    expect(images.map(({ delayDays }) => delayDays)).toEqual(
      images.map(({ delayDays }) => delayDays).sort((a, b) => a - b),
    )
  })

  it('is sampled from the north-east corner, row by row towards the south', () => {
    const grid = { east: 1, north: 0.5, stepArcsec: 0.5, columns: 3, rows: 2 }
    const surface = arrivalTimeSurface(model, source, grid)
    expect(surface.length).toBe(6)
    expect(surface[1]).toBe(arrivalTimeArcsec2(model, source, { east: 0.5, north: 0.5 }))
    expect(surface[3]).toBe(arrivalTimeArcsec2(model, source, { east: 1, north: 0 }))
  })
})
