import { readFileSync } from 'node:fs'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { readFits } from '@/lib/science/fits/read-fits'
import { pixelToSky, readWcs } from '@/lib/science/sky/wcs'
import { readReference } from './_reference'
import { ArcFitError } from './clicked-points'
import { combineRadii } from './combine-measurements'
import { signedDistance } from './ellipse-distance'
import { fitCircle, kasaCircle, taubinCircle } from './fit-circle'
import { fitEllipse } from './fit-ellipse'
import { SeededRandom } from './seeded-random'

interface Reference {
  sie: {
    lenses: {
      name: string
      b_arcsec: number
      sources: {
        case: string
        n_images: number
        images: { east_arcsec: number; north_arcsec: number }[]
        circle_through_images: {
          centre_fixed_on_lens_mean_radius: number
          half_largest_separation?: number
          kasa_circle_centre_east?: number
          kasa_circle_centre_north?: number
          kasa_circle_radius?: number
        }
      }[]
    }[]
  }
}
const cases = readReference<Reference>('lensing').sie.lenses.flatMap(({ name, b_arcsec, sources }) =>
  sources
    .filter(({ circle_through_images }) => circle_through_images !== undefined)
    .map((source) => ({ name, b_arcsec, ...source })),
)

const points = (xs: number[], ys: number[]) => xs.map((east, k) => ({ east, north: ys[k] }))
const onArc = (radius: number, from: number, to: number, count: number, centre = { east: 0, north: 0 }) =>
  Array.from({ length: count }, (_, k) => {
    const angle = ((from + ((to - from) * k) / Math.max(1, count - 1)) * Math.PI) / 180
    return { east: centre.east + radius * Math.sin(angle), north: centre.north + radius * Math.cos(angle) }
  })
const clickErrorArcsec = 0.05

describe('a circle', () => {
  // W. Gander, G. Golub & R. Strebel, BIT 34, 558 (1994), the points of their section 2 and their best geometric fit: centre
  // (4.7398, 2.9835), radius 4.7142 (values from memory; a minimum is unique here, so that four digits prove themselves).
  it('of the points of Gander, Golub and Strebel is theirs', () => {
    const fit = fitCircle({ points: points([1, 2, 5, 7, 9, 3], [7, 6, 8, 7, 5, 7]), clickErrorArcsec })
    expect(fit.centre.east).toBeCloseTo(4.7398, 4)
    expect(fit.centre.north).toBeCloseTo(2.9835, 4)
    expect(fit.radiusArcsec).toBeCloseTo(4.7142, 4)
    expect(fit.degreesOfFreedom).toBe(3)
  })

  // fixtures/lensing/lensing.json, circle measures of the images of an ellipsoid, ten digits.
  it.each(cases)('through the images of lens $name ($case) measures as the reference does', (row) => {
    const images = row.images.map(({ east_arcsec, north_arcsec }) => ({ east: east_arcsec, north: north_arcsec }))
    const expected = row.circle_through_images
    const held = fitCircle({ points: images, clickErrorArcsec }, { east: 0, north: 0 })
    expect(held.radiusArcsec).toBeCloseTo(expected.centre_fixed_on_lens_mean_radius, 9)
    if (expected.kasa_circle_radius === undefined) return
    const kasa = kasaCircle(images)
    expect(kasa?.centre.east).toBeCloseTo(expected.kasa_circle_centre_east ?? NaN, 9)
    expect(kasa?.centre.north).toBeCloseTo(expected.kasa_circle_centre_north ?? NaN, 9)
    expect(kasa?.radius).toBeCloseTo(expected.kasa_circle_radius, 9)
    // 'within a few per cent for an SIE' (the rule of the reference); 5 % at an axis ratio of 0.5.
    expect(Math.abs(fitCircle({ points: images, clickErrorArcsec }).radiusArcsec / row.b_arcsec - 1)).toBeLessThan(0.05)
  })

  // The ring stamps hold one circle of 1.5 arcsec in four orientations, one of them with pixels that are not square.
  it.each(['northup', 'rotated35', 'flipped', 'nonsquare'])(
    'clicked on the ring of the stamp %s is 1.5 arcsec',
    async (name) => {
      const { images } = await readFits(new Uint8Array(readFileSync(`fixtures/lensing/stamps/ring_${name}.fits`)))
      const [{ header, width, planes }] = images
      const wcs = readWcs(header)
      if (wcs === null) throw new Error('the stamp has no WCS')
      const at = pixelToSky(wcs, 30, 24.5)
      // The brightest pixels stand for clicks: each is within half a pixel of the ring.
      const bright = Array.from(planes[0], (value, k) => ({ value, x: k % width, y: Math.floor(k / width) }))
        .sort((a, b) => b.value - a.value)
        .slice(0, 40)
      const clicks = bright.map(({ x, y }) => {
        const { raDeg, decDeg } = pixelToSky(wcs, x, y)
        return {
          east: (raDeg - at.raDeg) * Math.cos((at.decDeg * Math.PI) / 180) * 3600,
          north: (decDeg - at.decDeg) * 3600,
        }
      })
      expect(fitCircle({ points: clicks, clickErrorArcsec: 0.1 }).radiusArcsec).toBeCloseTo(1.5, 1)
    },
  )

  it('through exact points of any arc is found', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.2, max: 40, noNaN: true }),
        fc.double({ min: 0, max: 360, noNaN: true }),
        fc.double({ min: 20, max: 350, noNaN: true }),
        fc.integer({ min: 3, max: 20 }),
        (radius, from, length, count) => {
          const centre = { east: 3, north: -7 }
          const fit = fitCircle({ points: onArc(radius, from, from + length, count, centre), clickErrorArcsec })
          expect(Math.abs(fit.radiusArcsec / radius - 1)).toBeLessThan(1e-6)
          expect(Math.hypot(fit.centre.east - 3, fit.centre.north + 7)).toBeLessThan(1e-6 * radius)
        },
      ),
    )
  })

  it('has an error that covers the truth as often as it should', () => {
    // 1 sigma covers 68 %: of 400 fits 273 are expected with a spread of 9.
    const random = new SeededRandom(11)
    const arc = onArc(1.4, 0, 140, 9)
    let covered = 0
    for (let k = 0; k < 400; k++) {
      const clicked = arc.map(({ east, north }) => ({
        east: east + clickErrorArcsec * random.normal(),
        north: north + clickErrorArcsec * random.normal(),
      }))
      const fit = fitCircle({ points: clicked, clickErrorArcsec })
      if (Math.abs(fit.radiusArcsec - 1.4) < fit.radiusErrorArcsec) covered++
    }
    // The error is never below what clicks give, so that it covers somewhat more.
    expect(covered).toBeGreaterThan(250)
    expect(covered).toBeLessThan(345)
  })

  it('is less sure the shorter the arc, and says when it is short', () => {
    const error = (length: number) => fitCircle({ points: onArc(2, 0, length, 12), clickErrorArcsec })
    expect(error(40).radiusErrorArcsec).toBeGreaterThan(10 * error(200).radiusErrorArcsec)
    expect(error(40).notes.join(' ')).toContain('The points span 40° of the circle')
    expect(error(200).notes).toEqual([])
  })

  it('through three points passes through them and says that it must', () => {
    const fit = fitCircle({ points: onArc(1, 0, 200, 3), clickErrorArcsec })
    expect(fit.residualArcsec).toBeLessThan(1e-9)
    expect(fit.degreesOfFreedom).toBe(0)
    expect(fit.radiusErrorArcsec).toBeGreaterThan(0)
    expect(fit.notes.join(' ')).toContain('by construction')
  })

  it('held round the lens has the mean distance, with the error of a mean', () => {
    const fit = fitCircle(
      { points: points([1, 0, -1.2, 0], [0, 1.1, 0, -0.9]), clickErrorArcsec: 0.2 },
      { east: 0, north: 0 },
    )
    expect(fit.radiusArcsec).toBeCloseTo(1.05, 12)
    expect(fit.radiusErrorArcsec).toBeCloseTo(0.1, 9)
    expect(fit.centreErrorArcsec).toEqual({ east: 0, north: 0 })
  })

  it('by Taubin bends less than by Kasa on a short arc with noise', () => {
    const random = new SeededRandom(2)
    let [kasa, taubin] = [0, 0]
    for (let k = 0; k < 200; k++) {
      const arc = onArc(2, 0, 60, 15).map(({ east, north }) => ({
        east: east + 0.05 * random.normal(),
        north: north + 0.05 * random.normal(),
      }))
      kasa += (kasaCircle(arc)?.radius ?? 0) / 200
      taubin += (taubinCircle(arc)?.radius ?? 0) / 200
    }
    expect(Math.abs(taubin - 2)).toBeLessThan(Math.abs(kasa - 2))
  })
})

describe('an ellipse', () => {
  // The points of Gander, Golub & Strebel's ellipses; the best geometric fit by scipy 1.10.1 (least_squares on centre, axes, angle and
  // the foot of each point, the lowest of 300 random starts), good to 3 digits.
  it('is the one with the least squares of distances', () => {
    const fit = fitEllipse({ points: points([1, 2, 5, 7, 9, 6, 3, 8], [7, 6, 8, 7, 5, 7, 2, 4]), clickErrorArcsec })
    expect(fit.residualArcsec ** 2 * 8).toBeCloseTo(1.4519, 4)
    expect(fit.centre.east).toBeCloseTo(3.533, 2)
    expect(fit.centre.north).toBeCloseTo(4.623, 2)
    expect(fit.semiMajorArcsec).toBeCloseTo(5.588, 2)
    expect(fit.semiMinorArcsec).toBeCloseTo(2.491, 2)
    expect(fit.positionAngleDeg).toBeCloseTo(90 - (0.20739 * 180) / Math.PI, 1)
  })

  it('through exact points is found, with its position angle from north through east', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.5, max: 30, noNaN: true }),
        fc.double({ min: 0.25, max: 0.95, noNaN: true }),
        fc.double({ min: 0, max: 179.9, noNaN: true }),
        fc.integer({ min: 6, max: 20 }),
        (major, ratio, angleDeg, count) => {
          const angle = (angleDeg * Math.PI) / 180
          const exact = Array.from({ length: count }, (_, k) => {
            const t = (2 * Math.PI * k) / count
            const [along, across] = [major * Math.cos(t), major * ratio * Math.sin(t)]
            return {
              east: 2 + along * Math.sin(angle) + across * Math.cos(angle),
              north: -1 + along * Math.cos(angle) - across * Math.sin(angle),
            }
          })
          const fit = fitEllipse({ points: exact, clickErrorArcsec })
          expect(Math.abs(fit.semiMajorArcsec / major - 1)).toBeLessThan(1e-4)
          expect(Math.abs(fit.semiMinorArcsec / major / ratio - 1)).toBeLessThan(1e-4)
          expect(Math.abs(Math.sin(((fit.positionAngleDeg - angleDeg) * Math.PI) / 180))).toBeLessThan(1e-4)
          expect(Math.abs(fit.radiusArcsec / major / Math.sqrt(ratio) - 1)).toBeLessThan(1e-4)
        },
      ),
      // The points at its ends lie beside the major axis by rounding alone.
      { examples: [[5.166591196750108, 0.25, 0, 6]] },
    )
  })

  // By hand: on the axes the nearest point is the end, within a^2 - b^2 over a of it.
  it.each([0, 1e-300, 1e-17, 1e-16, 3e-16, 1e-12])(
    'is as far from a point on its major axis but for %d as it is',
    (off) => {
      const ellipse = { centre: { east: 0, north: 0 }, semiMajor: 5, semiMinor: 1.25, positionAngleDeg: 0 }
      for (const [north, distance] of [
        [5, 0],
        [-5, 0],
        [6, 1],
        [4.9, -0.1],
      ]) {
        expect(signedDistance(ellipse, { east: off, north })).toBeCloseTo(distance, 9)
      }
    },
  )

  it('of a circle has its radius and no direction', () => {
    const random = new SeededRandom(5)
    const clicked = onArc(1.5, 0, 330, 12).map(({ east, north }) => ({
      east: east + 0.02 * random.normal(),
      north: north + 0.02 * random.normal(),
    }))
    const fit = fitEllipse({ points: clicked, clickErrorArcsec })
    expect(Math.abs(fit.radiusArcsec - 1.5)).toBeLessThan(2 * fit.radiusErrorArcsec)
    expect(fit.positionAngleErrorDeg).toBeNull()
  })

  it('says when the points span less than half of it', () => {
    expect(fitEllipse({ points: onArc(2, 0, 120, 9), clickErrorArcsec }).notes.join(' ')).toContain('less than half')
  })
})

describe('points that give no curve', () => {
  const line = points([0, 1, 2, 3, 4, 5], [0, 2, 4, 6, 8, 10])
  it.each<[string, () => unknown]>([
    [
      'A circle needs at least 3 different points and there are 2',
      () => fitCircle({ points: line.slice(0, 2), clickErrorArcsec }),
    ],
    ['A circle needs at least 3 different points and there are 0', () => fitCircle({ points: [], clickErrorArcsec })],
    ['only 2 of these 4 differ', () => fitCircle({ points: [line[0], line[0], line[1], line[1]], clickErrorArcsec })],
    ['The points lie on a straight line', () => fitCircle({ points: line, clickErrorArcsec })],
    [
      'Point 2 is not a pair of finite numbers',
      () => fitCircle({ points: points([0, NaN, 1], [0, 1, 5]), clickErrorArcsec }),
    ],
    ['The error of a click must be a number of arcsec above 0', () => fitCircle({ points: line, clickErrorArcsec: 0 })],
    [
      'An ellipse needs at least 5 different points and there are 4',
      () => fitEllipse({ points: line.slice(0, 4), clickErrorArcsec }),
    ],
    ['straight line', () => fitEllipse({ points: line, clickErrorArcsec })],
  ])('are refused: %s', (message, fit) => {
    expect(fit).toThrow(message)
    expect(fit).toThrow(ArcFitError)
  })
})

describe('several radii', () => {
  it('are combined with weights when all have errors', () => {
    // By hand: weights 100, 25, 25; mean (100 * 1 + 25 * 1.1 + 25 * 0.9) / 150 = 1; chi^2 = 0.25 + 0.25 = 0.5 of 2.
    const combined = combineRadii([
      { radiusArcsec: 1, errorArcsec: 0.1 },
      { radiusArcsec: 1.1, errorArcsec: 0.2 },
      { radiusArcsec: 0.9, errorArcsec: 0.2 },
    ])
    expect(combined?.radiusArcsec).toBeCloseTo(1, 12)
    expect(combined?.errorArcsec).toBeCloseTo(1 / Math.sqrt(150), 12)
    expect(combined?.scatterArcsec).toBeCloseTo(0.1, 12)
    expect(combined).toMatchObject({ scaleFactor: 1, medianArcsec: 1, apart: [], notes: [], isWeighted: true })
    expect(combined?.chiSquared).toBeCloseTo(0.5, 12)
  })

  it('that differ by more than their errors have a wider one, by the scale factor of the Particle Data Group', () => {
    // By hand: equal weights; mean 1.2, chi^2 = (0.2^2 + 0.2^2) / 0.1^2 = 8, S = sqrt(8 / 1), error 0.1 / sqrt(2) * S = 0.2.
    const combined = combineRadii([
      { radiusArcsec: 1, errorArcsec: 0.1 },
      { radiusArcsec: 1.4, errorArcsec: 0.1 },
    ])
    expect(combined?.scaleFactor).toBeCloseTo(Math.sqrt(8), 12)
    expect(combined?.errorArcsec).toBeCloseTo(0.2, 12)
    expect(combined?.notes.join(' ')).toContain('widened 2.8 times')
  })

  it('name the one that lies apart', () => {
    const near = [1, 1.02, 0.98].map((radiusArcsec) => ({ radiusArcsec, errorArcsec: 0.05 }))
    const combined = combineRadii([...near, { radiusArcsec: 1.6, errorArcsec: 0.05 }])
    expect(combined?.apart).toEqual([3])
    expect(combined?.notes.join(' ')).toContain('Measurement 4')
  })

  it('count alike where nobody has an error, with the error of the mean from their scatter', () => {
    const combined = combineRadii([1, 2].map((radiusArcsec) => ({ radiusArcsec, errorArcsec: null })))
    expect(combined).toMatchObject({ radiusArcsec: 1.5, isWeighted: false })
    expect(combined?.errorArcsec).toBeCloseTo(0.5, 12)
    expect(combined?.notes).toEqual(['Nobody’s error is known, so that all count alike.'])
  })

  it('without errors that are alike have no error instead of none at all', () => {
    const alike = [1.2, 1.2, 1.2].map((radiusArcsec) => ({ radiusArcsec, errorArcsec: null }))
    expect(combineRadii(alike)).toMatchObject({ errorArcsec: null })
    expect(combineRadii(alike.slice(1))).toMatchObject({ radiusArcsec: 1.2, errorArcsec: null })
  })

  // By hand: equal weights, mean 1.2, chi^2 = 0.5 of 2, error 0.02 / sqrt(3).
  it('with errors are not moved by one without, which is shown, counted and said to lie apart', () => {
    const measured = [1.2, 1.21, 1.19].map((radiusArcsec) => ({ radiusArcsec, errorArcsec: 0.02 }))
    const combined = combineRadii([...measured, { radiusArcsec: 3, errorArcsec: null }])
    expect(combined?.radiusArcsec).toBeCloseTo(1.2, 12)
    expect(combined?.errorArcsec).toBeCloseTo(0.02 / Math.sqrt(3), 12)
    expect(combined).toMatchObject({ count: 4, largestArcsec: 3, apart: [3], scaleFactor: 1, isWeighted: true })
    expect(combined?.notes[0]).toBe('One measurement without an error is shown and not in the value.')
    expect(combineRadii([...measured, { radiusArcsec: 1.22, errorArcsec: null }])?.apart).toEqual([])
  })

  it('of one person say that the scatter is not known', () => {
    const combined = combineRadii([{ radiusArcsec: 1.2, errorArcsec: 0.1 }])
    expect(combined).toMatchObject({ radiusArcsec: 1.2, scatterArcsec: null, scaleFactor: 1 })
    expect(combined?.errorArcsec).toBeCloseTo(0.1, 12)
    expect(combined?.notes).toEqual(['One measurement: how far people would differ is not known.'])
  })

  it('of nobody are nothing, and of impossible size are refused', () => {
    expect(combineRadii([])).toBeNull()
    expect(() => combineRadii([{ radiusArcsec: -1, errorArcsec: null }])).toThrow('Measurement 1 has the radius -1')
    expect(() => combineRadii([{ radiusArcsec: 1, errorArcsec: 0 }])).toThrow('Measurement 1 has the error 0')
  })
})
