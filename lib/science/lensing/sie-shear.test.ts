import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { readReference, relativeError } from './_reference'
import { discOutlines, lensCurves } from './critical-curves'
import { sieDeflection } from './sie'
import {
  convergence,
  deflection,
  inverseMagnification,
  jacobian,
  lensModel,
  potential,
  sourceOf,
  type ShearedLens,
} from './sie-shear'
import { pointImages } from './sie-shear-images'

interface LensCase {
  name: string
  b_arcsec: number
  axis_ratio_f: number
  pa_deg: number
  critical_curve_and_caustics: {
    points: Record<
      | 'lens_frame_polar_angle_from_minor_axis_deg'
      | 'critical_east'
      | 'critical_north'
      | 'tangential_caustic_east'
      | 'tangential_caustic_north'
      | 'cut_east'
      | 'cut_north',
      number
    >[]
    critical_area_arcsec2: number
  }
  sources: {
    case: string
    source_east: number
    source_north: number
    n_images: number
    images: { east_arcsec: number; north_arcsec: number; magnification_signed: number; type: string }[]
  }[]
}

const { lenses } = readReference<{ sie: { lenses: LensCase[] } }>('lensing').sie

type Polyline = readonly { east: number; north: number }[]

const distance = (line: Polyline, east: number, north: number) =>
  Math.min(...line.map((point) => Math.hypot(point.east - east, point.north - north)))

/** How often a closed polyline turns round a point. */
function windings(line: Polyline, { east, north }: { east: number; north: number }): number {
  let turned = 0
  for (const [k, point] of line.entries()) {
    const next = line[(k + 1) % line.length]
    const step = Math.atan2(next.east - east, next.north - north) - Math.atan2(point.east - east, point.north - north)
    turned += step - 2 * Math.PI * Math.round(step / (2 * Math.PI))
  }
  return Math.round(turned / (2 * Math.PI))
}

function area(line: Polyline): number {
  let twice = 0
  for (const [k, { east, north }] of line.entries()) {
    const next = line[(k + 1) % line.length]
    twice += east * next.north - next.east * north
  }
  return Math.abs(twice) / 2
}

// fixtures/lensing/lensing.json: Kormann, Schneider & Bartelmann 1994 in numpy, twelve digits.
describe.each(lenses)('the ellipsoid $name without shear', (row) => {
  const model = lensModel({
    einsteinRadiusArcsec: row.b_arcsec,
    axisRatio: row.axis_ratio_f,
    positionAngleDeg: row.pa_deg,
  })

  it.each(row.sources)('makes the images of the reference, of their kinds: source $case', (source) => {
    const images = pointImages(model, { east: source.source_east, north: source.source_north })
    expect(images.length).toBe(source.n_images)
    for (const expected of source.images) {
      const image = images.find(
        ({ east, north }) => Math.hypot(east - expected.east_arcsec, north - expected.north_arcsec) < 1e-10,
      )
      expect(relativeError(image?.magnification ?? 0, expected.magnification_signed)).toBeLessThan(1e-8)
      expect(expected.type).toContain(image?.kind)
    }
  })

  it('has the critical curve, the caustic and the cut of the reference', () => {
    // 360 steps put a point on each of the reference's directions; the angles are whole degrees.
    const { critical, caustic, cut } = lensCurves(model, 360)
    for (const point of row.critical_curve_and_caustics.points) {
      expect(distance(critical, point.critical_east, point.critical_north)).toBeLessThan(1e-10)
      expect(distance(caustic, point.tangential_caustic_east, point.tangential_caustic_north)).toBeLessThan(1e-10)
      expect(distance(cut, point.cut_east, point.cut_north)).toBeLessThan(1e-10)
    }
    // The polygon of n chords lacks a part of about (2 pi / n)^2 / 6 of the area, more where the curve bends more.
    const fine = lensCurves(model, 20000).critical
    expect(relativeError(area(fine), row.critical_curve_and_caustics.critical_area_arcsec2)).toBeLessThan(1e-6)
  })
})

const lensArbitrary: fc.Arbitrary<ShearedLens> = fc.record({
  einsteinRadiusArcsec: fc.double({ min: 0.3, max: 60, noNaN: true }),
  axisRatio: fc.double({ min: 0.2, max: 1, noNaN: true }),
  positionAngleDeg: fc.double({ min: -180, max: 360, noNaN: true }),
  centre: fc.record({
    east: fc.double({ min: -5, max: 5, noNaN: true }),
    north: fc.double({ min: -5, max: 5, noNaN: true }),
  }),
  shear: fc.record({
    strength: fc.double({ min: 0, max: 0.4, noNaN: true }),
    positionAngleDeg: fc.double({ min: -180, max: 360, noNaN: true }),
  }),
})
const polarArbitrary = fc.record({
  part: fc.double({ min: 0.05, max: 2, noNaN: true }),
  angle: fc.double({ min: 0, max: 6.28, noNaN: true }),
})
const placed = (lens: ShearedLens, { part, angle }: { part: number; angle: number }) => ({
  east: (lens.centre?.east ?? 0) + part * lens.einsteinRadiusArcsec * Math.sin(angle),
  north: (lens.centre?.north ?? 0) + part * lens.einsteinRadiusArcsec * Math.cos(angle),
})

describe('any ellipsoid with shear', () => {
  it('deflects by the gradient of its potential, and magnifies by the derivatives of its deflection', () => {
    fc.assert(
      fc.property(lensArbitrary, polarArbitrary, (lens, polar) => {
        const model = lensModel(lens)
        const at = placed(lens, polar)
        const h = 1e-4 * lens.einsteinRadiusArcsec
        const slope = (of: (place: { east: number; north: number }) => number) => ({
          east: (of({ ...at, east: at.east + h }) - of({ ...at, east: at.east - h })) / (2 * h),
          north: (of({ ...at, north: at.north + h }) - of({ ...at, north: at.north - h })) / (2 * h),
        })
        const alpha = deflection(model, at)
        const gradient = slope((place) => potential(model, place))
        // Second-order differences on a curve whose third derivative grows as 1/part^2.
        const tolerance = (1e-6 * lens.einsteinRadiusArcsec) / (polar.part * lens.axisRatio) ** 3
        expect(Math.abs(gradient.east - alpha.east)).toBeLessThan(tolerance)
        expect(Math.abs(gradient.north - alpha.north)).toBeLessThan(tolerance)
        const [ee, en, nn] = jacobian(model, at)
        const ofEast = slope((place) => sourceOf(model, place).east)
        const ofNorth = slope((place) => sourceOf(model, place).north)
        const rough = 1e-6 / (polar.part * lens.axisRatio) ** 4
        expect(Math.abs(ofEast.east - ee)).toBeLessThan(rough)
        expect(Math.abs(ofEast.north - en)).toBeLessThan(rough)
        expect(Math.abs(ofNorth.east - en)).toBeLessThan(rough)
        expect(Math.abs(ofNorth.north - nn)).toBeLessThan(rough)
        expect(relativeError(ee * nn - en * en, inverseMagnification(model, at))).toBeLessThan(1e-6)
        // Trace: 2 - 2 kappa, shear adds no mass.
        expect(ee + nn).toBeCloseTo(2 - 2 * convergence(model, at), 9)
      }),
    )
  })

  // Each image is a root; how many there must be follows from the curves, drawn by another formula: one, one more inside the cut,
  // two more for each turn of the caustic round the source.
  it('has as many images as its cut and caustic say, each of which maps back to the source', () => {
    let fourOrMore = 0
    fc.assert(
      fc.property(lensArbitrary, polarArbitrary, (lens, polar) => {
        const model = lensModel(lens)
        const source = placed(lens, { ...polar, part: polar.part * 0.5 })
        const { caustic, cut } = lensCurves(model, 1500)
        const near = 0.01 * lens.einsteinRadiusArcsec
        fc.pre(distance(caustic, source.east, source.north) > near && distance(cut, source.east, source.north) > near)
        const expected = 1 + Math.abs(windings(cut, source)) + 2 * Math.abs(windings(caustic, source))
        const images = pointImages(model, source)
        expect(images.length).toBe(expected)
        if (images.length >= 4) fourOrMore++
        for (const image of images) {
          const from = sourceOf(model, image)
          expect(Math.hypot(from.east - source.east, from.north - source.north)).toBeLessThan(
            1e-9 * lens.einsteinRadiusArcsec,
          )
        }
      }),
      { numRuns: 150, seed: 7 },
    )
    expect(fourOrMore).toBeGreaterThan(10)
  })

  it('finds the pair of images that has just been born on the caustic', () => {
    const model = lensModel({
      einsteinRadiusArcsec: 1.2,
      axisRatio: 0.7,
      positionAngleDeg: 30,
      shear: { strength: 0.07, positionAngleDeg: 100 },
    })
    const { caustic } = lensCurves(model, 360)
    for (const k of [20, 60, 110, 160, 200, 300]) {
      // The middle of the caustic is the lens, so that a step towards it leads inside and one away leads outside.
      const [inside, outside] = [1 - 1e-6, 1 + 1e-6].map((part) => ({
        east: part * caustic[k].east,
        north: part * caustic[k].north,
      }))
      expect(pointImages(model, inside).length).toBe(4)
      expect(pointImages(model, outside).length).toBe(2)
    }
  })

  it('moves and turns with its centre and its angles', () => {
    const lens = {
      einsteinRadiusArcsec: 1,
      axisRatio: 0.6,
      positionAngleDeg: 10,
      shear: { strength: 0.1, positionAngleDeg: 50 },
    }
    const turned = {
      ...lens,
      positionAngleDeg: 100,
      shear: { strength: 0.1, positionAngleDeg: 140 },
      centre: { east: 3, north: -2 },
    }
    // A turn by 90 degrees from north through east takes (east, north) to (north, -east).
    const before = pointImages(lensModel(lens), { east: 0.05, north: 0.1 })
    const after = pointImages(lensModel(turned), { east: 3 + 0.1, north: -2 - 0.05 })
    expect(before.length).toBe(4)
    for (const [k, { east, north, magnification }] of before.entries()) {
      expect(after[k].east).toBeCloseTo(3 + north, 9)
      expect(after[k].north).toBeCloseTo(-2 - east, 9)
      expect(after[k].magnification).toBeCloseTo(magnification, 6)
    }
  })
})

describe('the sphere with shear', () => {
  // On its axes M x - b = 0, so the images of a source exactly behind stand at b / (1 - g) along the shear angle and at b / (1 + g)
  // across it; the cusps of the caustic follow from the same two lines: 2 b g / (1 + g) and 2 b g / (1 - g).
  const [b, g] = [1.5, 0.12]
  const model = lensModel({
    einsteinRadiusArcsec: b,
    axisRatio: 1,
    positionAngleDeg: 0,
    shear: { strength: g, positionAngleDeg: 30 },
  })

  it('stretches the images along the shear angle', () => {
    const images = pointImages(model, { east: 0, north: 0 })
    const radii = images.map(({ east, north }) => Math.hypot(east, north)).sort((x, y) => x - y)
    const expected = [b / (1 + g), b / (1 + g), b / (1 - g), b / (1 - g)]
    expect(radii.length).toBe(4)
    for (const [k, radius] of radii.entries()) expect(radius).toBeCloseTo(expected[k], 9)
    const far = images.find(({ east, north }) => Math.hypot(east, north) > b && north > 0)
    expect(((Math.atan2(far?.east ?? 0, far?.north ?? 0) * 180) / Math.PI + 360) % 360).toBeCloseTo(30, 6)
  })

  it('has its cusps where the formula puts them', () => {
    const reach = lensCurves(model, 360).caustic.map(({ east, north }) => Math.hypot(east, north))
    expect(Math.max(...reach)).toBeCloseTo((2 * b * g) / (1 - g), 9)
    expect(reach[30]).toBeCloseTo((2 * b * g) / (1 + g), 9)
    expect(reach[120]).toBeCloseTo((2 * b * g) / (1 - g), 9)
  })

  // N. Dalal, ApJ 509, L13 (1998): the signed magnifications of the four images of a sphere with shear add up to 2 / (1 - g^2)
  // (formula from memory; that it comes out for every source is its proof).
  it('has four images whose signed magnifications add up to 2 / (1 - g^2)', () => {
    for (const source of [
      { east: 0.01, north: 0.02 },
      { east: -0.1, north: 0.05 },
      { east: 0.06, north: -0.11 },
    ]) {
      const images = pointImages(model, source)
      expect(images.length).toBe(4)
      expect(images.reduce((sum, { magnification }) => sum + magnification, 0)).toBeCloseTo(2 / (1 - g * g), 7)
    }
  })

  it('without shear has a ring and no points for a source exactly behind, and its outline is a circle', () => {
    const round = lensModel({ einsteinRadiusArcsec: b, axisRatio: 1, positionAngleDeg: 0 })
    expect(pointImages(round, { east: 0, north: 0 })).toEqual([])
    const [ring, ...others] = discOutlines(round, { east: 0, north: 0 }, 0.2)
    expect(others).toEqual([])
    for (const { east, north } of ring.outer) expect(Math.hypot(east, north)).toBeCloseTo(b + 0.2, 12)
    for (const { east, north } of ring.inner ?? []) expect(Math.hypot(east, north)).toBeCloseTo(b - 0.2, 12)
    expect(ring.inner?.length).toBe(ring.outer.length)
  })
})

describe('the outlines of a round source', () => {
  const lens = {
    einsteinRadiusArcsec: 8,
    axisRatio: 0.6,
    positionAngleDeg: 70,
    centre: { east: 1, north: 2 },
    shear: { strength: 0.08, positionAngleDeg: 10 },
  }
  const model = lensModel(lens)

  it('map back to the edge of the source', () => {
    const source = { east: 2.5, north: 3.5 }
    const outlines = discOutlines(model, source, 0.6)
    expect(outlines.length).toBeGreaterThan(0)
    for (const { outer } of outlines) {
      for (const point of outer) {
        const from = sourceOf(model, point)
        expect(Math.hypot(from.east - source.east, from.north - source.north)).toBeCloseTo(0.6, 9)
      }
    }
  })

  it('of a small source are one for each image, with the area that its magnification gives', () => {
    const source = { east: 1.2, north: 2.3 }
    const size = 0.01
    const images = pointImages(model, source)
    const outlines = discOutlines(model, source, size, 200_000)
    expect(images.length).toBe(4)
    const areas = outlines.map(({ outer }) => area(outer) / (Math.PI * size * size)).sort((x, y) => y - x)
    expect(areas.length).toBe(4)
    // To first order in size over the distance to the caustic.
    for (const [k, { magnification }] of images.entries()) {
      expect(relativeError(areas[k], Math.abs(magnification))).toBeLessThan(0.02)
    }
  })

  it('holds the lens itself when a large source covers the cut', () => {
    const [{ inner }] = discOutlines(model, { east: 1, north: 2 }, 30)
    expect(inner).toBeUndefined()
  })
})

describe('a lens that cannot be', () => {
  const lens = { einsteinRadiusArcsec: 1, axisRatio: 0.8, positionAngleDeg: 0 }

  it('is refused with a sentence', () => {
    expect(() => lensModel({ ...lens, axisRatio: 0 })).toThrow('axis ratio')
    expect(() => lensModel({ ...lens, einsteinRadiusArcsec: -1 })).toThrow(
      'An Einstein radius is a number of arcsec from 0',
    )
    expect(() => lensModel({ ...lens, shear: { strength: 1, positionAngleDeg: 0 } })).toThrow(
      'Shear lies from 0 to below 1',
    )
    expect(() => lensModel({ ...lens, shear: { strength: NaN, positionAngleDeg: 0 } })).toThrow('NaN does not')
  })

  it('of no shear deflects as the plain ellipsoid does', () => {
    const at = { east: 0.3, north: -1.1 }
    expect(deflection(lensModel(lens), at)).toEqual(sieDeflection(lens, at))
  })
})
