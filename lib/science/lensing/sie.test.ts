import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { readReference, relativeError } from './_reference'
import { sieConvergence, sieDeflection, sieImages, type EllipsoidLens } from './sie'
import { sisDeflection } from './sis'

interface LensCase {
  name: string
  b_arcsec: number
  axis_ratio_f: number
  pa_deg: number
  deflection: { east: number; north: number; alpha_east: number; alpha_north: number; kappa: number }[]
  sources: {
    case: string
    source_east: number
    source_north: number
    n_images: number
    images: { east_arcsec: number; north_arcsec: number; magnification_signed: number }[]
  }[]
}

const { lenses } = readReference<{ sie: { lenses: LensCase[] } }>('lensing').sie

const lensOf = ({ b_arcsec, axis_ratio_f, pa_deg }: LensCase): EllipsoidLens => ({
  einsteinRadiusArcsec: b_arcsec,
  axisRatio: axis_ratio_f,
  positionAngleDeg: pa_deg,
})

// Kormann, Schneider & Bartelmann 1994 in numpy, the deflection checked against a Fourier solution of Poisson's
// equation; twelve digits are given.
describe.each(lenses)('the singular isothermal ellipsoid $name', (row) => {
  const lens = lensOf(row)

  it('deflects as the reference does', () => {
    for (const { east, north, alpha_east, alpha_north, kappa } of row.deflection) {
      const alpha = sieDeflection(lens, { east, north })
      expect(Math.abs(alpha.east - alpha_east)).toBeLessThan(1e-11)
      expect(Math.abs(alpha.north - alpha_north)).toBeLessThan(1e-11)
      expect(relativeError(sieConvergence(lens, { east, north }), kappa)).toBeLessThan(1e-11)
    }
  })

  it.each(row.sources)('makes $n_images images of a source $case', (source) => {
    const images = sieImages(lens, { east: source.source_east, north: source.source_north })
    expect(images.length).toBe(source.n_images)
    for (const expected of source.images) {
      const nearest = images.find(
        ({ east, north }) => Math.hypot(east - expected.east_arcsec, north - expected.north_arcsec) < 1e-9,
      )
      expect(nearest, `image at ${expected.east_arcsec}, ${expected.north_arcsec}`).toBeDefined()
      expect(relativeError(nearest?.magnification ?? 0, expected.magnification_signed)).toBeLessThan(1e-6)
    }
  })
})

const lensArbitrary = fc.record({
  einsteinRadiusArcsec: fc.double({ min: 0.3, max: 5, noNaN: true }),
  axisRatio: fc.double({ min: 0.2, max: 1, noNaN: true }),
  positionAngleDeg: fc.double({ min: -180, max: 360, noNaN: true }),
})
const positionArbitrary = fc
  .record({
    radius: fc.double({ min: 0.05, max: 8, noNaN: true }),
    angle: fc.double({ min: 0, max: 6.28, noNaN: true }),
  })
  .map(({ radius, angle }) => ({ east: radius * Math.cos(angle), north: radius * Math.sin(angle) }))

describe('any singular isothermal ellipsoid', () => {
  it('turned with its sky deflects by the turned deflection', () => {
    fc.assert(
      fc.property(
        lensArbitrary,
        positionArbitrary,
        fc.double({ min: 0, max: 360, noNaN: true }),
        (lens, at, turnDeg) => {
          // A turn from north through east by t takes (E, N) to (E cos t + N sin t, N cos t - E sin t).
          const t = (turnDeg * Math.PI) / 180
          const turned = ({ east, north }: { east: number; north: number }) => ({
            east: east * Math.cos(t) + north * Math.sin(t),
            north: north * Math.cos(t) - east * Math.sin(t),
          })
          const first = turned(sieDeflection(lens, at))
          const second = sieDeflection({ ...lens, positionAngleDeg: lens.positionAngleDeg + turnDeg }, turned(at))
          expect(second.east).toBeCloseTo(first.east, 9)
          expect(second.north).toBeCloseTo(first.north, 9)
        },
      ),
    )
  })

  it('deflects opposite points oppositely, and equally at every distance in one direction', () => {
    fc.assert(
      fc.property(lensArbitrary, positionArbitrary, (lens, { east, north }) => {
        const alpha = sieDeflection(lens, { east, north })
        const opposite = sieDeflection(lens, { east: -east, north: -north })
        const further = sieDeflection(lens, { east: 3 * east, north: 3 * north })
        expect(opposite.east).toBeCloseTo(-alpha.east, 12)
        expect(opposite.north).toBeCloseTo(-alpha.north, 12)
        expect(further.east).toBeCloseTo(alpha.east, 12)
        expect(further.north).toBeCloseTo(alpha.north, 12)
      }),
    )
  })

  it('has a deflection whose divergence is twice the convergence and whose curl is 0', () => {
    const lens = { einsteinRadiusArcsec: 1.3, axisRatio: 0.6, positionAngleDeg: 40 }
    const h = 1e-5
    for (const [east, north] of [
      [1, 0.3],
      [-0.4, 1.7],
      [2.1, -1.1],
    ]) {
      const right = sieDeflection(lens, { east: east + h, north })
      const left = sieDeflection(lens, { east: east - h, north })
      const up = sieDeflection(lens, { east, north: north + h })
      const down = sieDeflection(lens, { east, north: north - h })
      const divergence = (right.east - left.east + up.north - down.north) / (2 * h)
      const curl = (right.north - left.north - up.east + down.east) / (2 * h)
      expect(divergence).toBeCloseTo(2 * sieConvergence(lens, { east, north }), 7)
      expect(curl).toBeCloseTo(0, 7)
    }
  })

  it('becomes the sphere as it becomes round', () => {
    const at = { east: 1.2, north: -0.7 }
    const sphere = sisDeflection(1.4, at)
    for (const axisRatio of [1, 1 - 1e-7, 1 - 1e-5]) {
      const alpha = sieDeflection({ einsteinRadiusArcsec: 1.4, axisRatio, positionAngleDeg: 20 }, at)
      expect(Math.abs(alpha.east - sphere.east)).toBeLessThan(2 * (1 - axisRatio) + 1e-9)
      expect(Math.abs(alpha.north - sphere.north)).toBeLessThan(2 * (1 - axisRatio) + 1e-9)
    }
  })

  it('maps every image it finds back to the source', () => {
    fc.assert(
      fc.property(lensArbitrary, positionArbitrary, (lens, offset) => {
        const source = { east: 0.2 * offset.east, north: 0.2 * offset.north }
        const images = sieImages(lens, source)
        expect(images.length).toBeGreaterThanOrEqual(1)
        for (const image of images) {
          const alpha = sieDeflection(lens, image)
          expect(image.east - alpha.east).toBeCloseTo(source.east, 8)
          expect(image.north - alpha.north).toBeCloseTo(source.north, 8)
        }
      }),
    )
  })

  it('moves with its centre', () => {
    const lens = { einsteinRadiusArcsec: 1, axisRatio: 0.7, positionAngleDeg: 10 }
    const shifted = { ...lens, centre: { east: 0.5, north: -0.2 } }
    const plain = sieDeflection(lens, { east: 1, north: 1 })
    const moved = sieDeflection(shifted, { east: 1.5, north: 0.8 })
    expect(moved.east).toBeCloseTo(plain.east, 12)
    expect(moved.north).toBeCloseTo(plain.north, 12)
  })

  it('refuses an axis ratio that is not above 0 and up to 1', () => {
    const lens = { einsteinRadiusArcsec: 1, axisRatio: 1.2, positionAngleDeg: 0 }
    expect(() => sieDeflection(lens, { east: 1, north: 1 })).toThrow(
      'axis ratio of a lens lies above 0 and up to 1; 1.2',
    )
    expect(() => sieImages({ ...lens, axisRatio: 0 }, { east: 1, north: 1 })).toThrow('axis ratio')
  })
})
