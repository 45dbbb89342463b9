import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { readFits } from '@/lib/science/fits/read-fits'
import { pixelScaleArcsec, pixelToSky, readWcs } from '@/lib/science/sky/wcs'
import { readReference } from './_reference'
import { discOutlines } from './critical-curves'
import { fitSie, type FitRequest } from './fit-sie'
import { ridgeRadius } from './fit-sie-residuals'
import { lensModel } from './sie-shear'
import { pointImages } from './sie-shear-images'
import { SeededRandom } from './seeded-random'

interface Reference {
  sie: {
    lenses: {
      name: string
      b_arcsec: number
      axis_ratio_f: number
      pa_deg: number
      sources: {
        case: string
        n_images: number
        source_east: number
        source_north: number
        images: { east_arcsec: number; north_arcsec: number }[]
      }[]
    }[]
  }
}
const { lenses } = readReference<Reference>('lensing').sie
const quads = lenses.map(({ sources, ...lens }) => ({ ...lens, source: sources[0] }))

const origin = { east: 0, north: 0 }
const plain = { held: { centre: origin }, clickErrorArcsec: 0.05, pixelScaleArcsec: 0.2 } as const
const byName = (fit: ReturnType<typeof fitSie>, name: string) => {
  const found = fit.parameters.find((parameter) => parameter.name === name)
  if (!found) throw new Error(`no parameter ${name}`)
  return found
}

describe('a lens fitted to four images', () => {
  // fixtures/lensing/lensing.json: image positions by another code, residuals below 1e-9 arcsec.
  it.each(quads)(
    'finds the lens $name that the reference made them with',
    ({ b_arcsec, axis_ratio_f, pa_deg, source }) => {
      const points = source.images.map(({ east_arcsec, north_arcsec }) => ({ east: east_arcsec, north: north_arcsec }))
      const fit = fitSie({ ...plain, points, pointsAre: 'images', kind: 'ellipsoid' })
      expect(fit.lens.einsteinRadiusArcsec).toBeCloseTo(b_arcsec, 7)
      expect(fit.lens.axisRatio).toBeCloseTo(axis_ratio_f, 6)
      expect(Math.abs(Math.sin(((fit.lens.positionAngleDeg - pa_deg) * Math.PI) / 180))).toBeLessThan(1e-6)
      expect(fit.source.east).toBeCloseTo(source.source_east, 6)
      expect(fit.source.north).toBeCloseTo(source.source_north, 6)
      expect(fit.residualArcsec).toBeLessThan(1e-7)
      expect(fit.residualPixels).toBeCloseTo(fit.residualArcsec / 0.2, 12)
      expect([fit.constraints, fit.unknowns, fit.degreesOfFreedom]).toEqual([8, 5, 3])
      expect(fit.notes).toEqual([])
    },
  )

  it('tells ellipticity from shear, at the width of a cluster too', () => {
    for (const scale of [1, 25]) {
      const lens = {
        einsteinRadiusArcsec: 1.1 * scale,
        axisRatio: 0.65,
        positionAngleDeg: 20,
        shear: { strength: 0.1, positionAngleDeg: 95 },
      }
      const points = pointImages(lensModel(lens), { east: 0.04 * scale, north: -0.05 * scale })
      const fit = fitSie({ ...plain, points, pointsAre: 'images', kind: 'ellipsoid-shear' })
      expect(fit.lens.einsteinRadiusArcsec / scale).toBeCloseTo(1.1, 6)
      expect(fit.lens.axisRatio).toBeCloseTo(0.65, 5)
      expect(fit.lens.shear?.strength).toBeCloseTo(0.1, 5)
      expect(fit.lens.shear?.positionAngleDeg).toBeCloseTo(95, 3)
      expect(fit.degreesOfFreedom).toBe(1)
    }
  })

  // The stamps hold one sky in four orientations: clicks differ, the lens must not. Pixels by astropy 5.2.1.
  const stamps = JSON.parse(readFileSync('fixtures/lensing/stamps.json', 'utf8')) as {
    rows: {
      files: string[]
      lens_centre_x0: number
      lens_centre_y0: number
      sie4: { images: { x0: number; y0: number }[] }
    }[]
  }
  it.each(stamps.rows)(
    'finds lens B from pixels of $files.0',
    async ({ files, lens_centre_x0, lens_centre_y0, sie4 }) => {
      const { images } = await readFits(new Uint8Array(readFileSync(`fixtures/lensing/stamps/${files[0]}`)))
      const wcs = readWcs(images[0].header)
      if (wcs === null) throw new Error('the stamp has no WCS')
      const centre = pixelToSky(wcs, lens_centre_x0, lens_centre_y0)
      const points = sie4.images.map(({ x0, y0 }) => {
        const { raDeg, decDeg } = pixelToSky(wcs, x0, y0)
        const east = (raDeg - centre.raDeg) * Math.cos((decDeg * Math.PI) / 180) * 3600
        return { east, north: (decDeg - centre.decDeg) * 3600 }
      })
      const fit = fitSie({
        ...plain,
        points,
        pointsAre: 'images',
        kind: 'ellipsoid',
        pixelScaleArcsec: pixelScaleArcsec(wcs)[0],
      })
      // Pixels are given to 1e-7.
      expect(fit.lens.einsteinRadiusArcsec).toBeCloseTo(1.2, 5)
      expect(fit.lens.axisRatio).toBeCloseTo(0.7, 4)
      expect(fit.lens.positionAngleDeg).toBeCloseTo(30, 2)
    },
  )

  it('gives uncertainties that cover the truth as often as they should', () => {
    // 1 sigma covers 68 %: of 40 fits 27 are expected with a spread of 3, so that 15 to 39 is four spreads.
    const truth = { einsteinRadiusArcsec: 1.2, axisRatio: 0.7, positionAngleDeg: 30 }
    const points = pointImages(lensModel(truth), { east: 0.08, north: 0.01 })
    const random = new SeededRandom(4)
    let covered = 0
    for (let k = 0; k < 40; k++) {
      const clicked = points.map(({ east, north }) => ({
        east: east + 0.01 * random.normal(),
        north: north + 0.01 * random.normal(),
      }))
      const fit = fitSie({ ...plain, points: clicked, pointsAre: 'images', kind: 'ellipsoid', clickErrorArcsec: 0.01 })
      const { value, uncertainty } = byName(fit, 'Einstein radius')
      if (Math.abs(value - 1.2) < (uncertainty ?? 0)) covered++
    }
    expect(covered).toBeGreaterThan(15)
    expect(covered).toBeLessThan(39)
  })

  it('says so when a lens of this kind does not make them', () => {
    const points = [
      { east: 1, north: 0 },
      { east: -1.5, north: 0.2 },
      { east: 0.3, north: 2.4 },
      { east: 0.8, north: 0.9 },
    ]
    const fit = fitSie({ ...plain, points, pointsAre: 'images', kind: 'ellipsoid' })
    expect(fit.notes.join(' ')).toContain('this lens, with this centre, does not make them')
  })
})

describe('a lens fitted to two images', () => {
  it('is round, with the radius of half their separation', () => {
    // Two images of a sphere stand at y + b and y - b on one line (Narayan & Bartelmann 1996).
    const points = [
      { east: 0.9, north: 1.2 },
      { east: -0.3, north: -0.4 },
    ]
    const fit = fitSie({ ...plain, points, pointsAre: 'images', kind: 'sphere' })
    expect(fit.lens.einsteinRadiusArcsec).toBeCloseTo(1, 8)
    expect(fit.source.east).toBeCloseTo(0.3, 8)
    expect(fit.degreesOfFreedom).toBe(1)
    // Radius = (r1 + r2) / 2, each with the error of a click: 0.05 / sqrt(2).
    expect(byName(fit, 'Einstein radius').uncertainty).toBeCloseTo(0.05 / Math.SQRT2, 4)
  })

  it.each(['ellipsoid', 'sphere-shear', 'ellipsoid-shear'] as const)('cannot fix %s, and is told so', (kind) => {
    const points = [
      { east: 1, north: 0 },
      { east: -0.5, north: 0.1 },
    ]
    expect(() => fitSie({ ...plain, points, pointsAre: 'images', kind })).toThrow(
      'Two images cannot fix ellipticity or shear',
    )
  })

  it('may take the shape of the galaxy light, held as given', () => {
    const ellipse = { axisRatio: 0.75, positionAngleDeg: 50 }
    const points = pointImages(lensModel({ einsteinRadiusArcsec: 1.3, ...ellipse }), { east: 0.5, north: 0.4 })
    expect(points.length).toBe(2)
    const fit = fitSie({ ...plain, points, pointsAre: 'images', kind: 'sphere', held: { centre: origin, ellipse } })
    expect(fit.lens.einsteinRadiusArcsec).toBeCloseTo(1.3, 6)
    expect(fit.lens).toMatchObject(ellipse)
  })
})

describe('a lens fitted to points along an arc', () => {
  const lens = { einsteinRadiusArcsec: 2, axisRatio: 0.75, positionAngleDeg: 60 }
  const source = { east: 0.15, north: 0.25 }
  const arc = (from: number, to: number, count: number) =>
    Array.from({ length: count }, (_, k) => {
      const angle = ((from + ((to - from) * k) / (count - 1)) * Math.PI) / 180
      const radius = ridgeRadius(lensModel(lens), source, Math.sin(angle), Math.cos(angle))
      return { east: radius * Math.sin(angle), north: radius * Math.cos(angle) }
    })

  it('finds the lens from a long arc and its counter-image', () => {
    const points = [...arc(-20, 100, 9), ...arc(205, 230, 3)]
    const fit = fitSie({ ...plain, points, pointsAre: 'arc', kind: 'ellipsoid' })
    expect(fit.lens.einsteinRadiusArcsec).toBeCloseTo(2, 5)
    expect(fit.lens.axisRatio).toBeCloseTo(0.75, 4)
    expect([fit.constraints, fit.degreesOfFreedom]).toEqual([12, 7])
    expect(fit.residualArcsec).toBeLessThan(1e-6)
    expect(fit.images).toEqual([])
  })

  it('has its ridge between the edges of the arc', () => {
    const [outline] = discOutlines(lensModel(lens), source, 0.1)
    const middle = outline.outer.length / 4
    const edge = outline.outer[Math.floor(middle)]
    const angle = Math.atan2(edge.east, edge.north)
    const ridge = ridgeRadius(lensModel(lens), source, Math.sin(angle), Math.cos(angle))
    expect(ridge).toBeLessThan(Math.hypot(edge.east, edge.north))
    expect(ridge).toBeGreaterThan(Math.hypot(edge.east, edge.north) - 0.5)
  })

  it('is honest that as many points as unknowns prove nothing', () => {
    const fit = fitSie({ ...plain, points: arc(-20, 200, 5), pointsAre: 'arc', kind: 'ellipsoid' })
    expect(fit.degreesOfFreedom).toBe(0)
    expect(fit.notes.join(' ')).toContain('a small residual is no evidence')
  })

  it('says when a short arc does not fix an ellipse, and gives no error where nothing is known', () => {
    const fit = fitSie({ ...plain, points: arc(0, 50, 8), pointsAre: 'arc', kind: 'ellipsoid', clickErrorArcsec: 0.2 })
    expect(fit.notes.join(' ')).toContain('the radius is uncertain by more than 30 %')
    expect(byName(fit, 'axis ratio').uncertainty).toBeNull()
  })

  it('is less sure of the radius the shorter the arc', () => {
    const error = (to: number) =>
      byName(fitSie({ ...plain, points: arc(0, to, 12), pointsAre: 'arc', kind: 'sphere' }), 'Einstein radius')
        .uncertainty
    expect(error(60) ?? 0).toBeGreaterThan(3 * (error(300) ?? Infinity))
  })
})

describe('a fit that cannot be made', () => {
  const two = [
    { east: 1, north: 0 },
    { east: -0.5, north: 0 },
  ]
  const request: FitRequest = { ...plain, points: two, pointsAre: 'images', kind: 'sphere' }
  it.each<[string, Partial<FitRequest>]>([
    ['1 point gives 2 numbers (each image gives two) and this lens has 3 unknowns', { points: two.slice(0, 1) }],
    ['2 points give 2 numbers (each point on an arc gives one)', { pointsAre: 'arc' }],
    ['Point 2 was clicked twice in the same place', { points: [two[0], two[0]] }],
    ['Point 2 lies on the lens itself', { points: [two[0], origin] }],
    ['not a pair of finite numbers', { points: [two[0], { east: NaN, north: 0 }] }],
    ['must be above 0', { clickErrorArcsec: 0 }],
  ])('is refused: %s', (message, change) => {
    expect(() => fitSie({ ...request, ...change })).toThrow(message)
  })
})

it('a search that begins at a fit made before ends there, for every kind of lens', () => {
  const held = { centre: { east: 0.1, north: -0.2 } }
  const lens = {
    einsteinRadiusArcsec: 1.3,
    axisRatio: 0.75,
    positionAngleDeg: 65,
    centre: held.centre,
    shear: { strength: 0.06, positionAngleDeg: 110 },
  }
  const points = pointImages(lensModel(lens), { east: 0.14, north: -0.13 })
  expect(points).toHaveLength(4)
  for (const kind of ['ellipsoid', 'sphere-shear', 'ellipsoid-shear'] as const) {
    const request = { points, pointsAre: 'images' as const, kind, held, clickErrorArcsec: 0.05, pixelScaleArcsec: 0.2 }
    const all = fitSie(request)
    const again = fitSie({ ...request, start: { lens: all.lens, source: all.source } })
    expect(again.residualArcsec).toBeCloseTo(all.residualArcsec, 6)
    expect(again.lens.einsteinRadiusArcsec).toBeCloseTo(all.lens.einsteinRadiusArcsec, 5)
  }
})
