import { describe, expect, it } from 'vitest'
import type { PaintedArc } from '@/lib/science/lensing/painting/arcs'
import type { PaintingTruth } from '@/lib/science/lensing/painting/paint-lens'
import { USUAL_RANGES } from '@/lib/science/lensing/painting/painting-ranges'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { directionOf, explainPainting } from './explain-painting'
import { OrderInput } from './painting-input'
import { proposeNames } from '@/lib/work/intake/stamp-name'

const arc = (positionAngleDeg: number, lengthDeg: number, radiusArcsec = 1.4): PaintedArc => ({
  rays: [],
  positionAngleDeg,
  lengthDeg,
  radiusArcsec,
  brightness: 0.8,
})
const ray = (positionAngleDeg: number) => ({ positionAngleDeg, innerArcsec: 1, outerArcsec: 2 })
const truth = (arcs: PaintedArc[], arcSignalToNoise = 60) =>
  ({ arcs, arcSignalToNoise, einsteinRadiusArcsec: 1.31 }) as PaintingTruth

describe('the explanation of a painted stamp', () => {
  it.each([
    [[arc(44, 100)], 60, 'A blue arc 1.4 arcsec to the north-east, painted over'],
    [
      [arc(44, 100), arc(220, 30, 0.8)],
      60,
      'A blue arc 1.4 arcsec to the north-east and a counter-image 0.8 arcsec to the south-west,',
    ],
    // Of two images the farther one is the brighter-magnified one outside the ring, whichever has the brightest pixel (Einstein radius 1.31).
    [
      [arc(44, 70, 0.9), arc(220, 30, 2.2)],
      60,
      'A blue image 2.2 arcsec to the south-west and a counter-image 0.9 arcsec to the north-east,',
    ],
    [
      [{ ...arc(10, 200), rays: [0, 45, 90, 135, 180, 225].map(ray) }],
      60,
      'A blue arc 1.4 arcsec from the middle, from the north by the south-east to the south-west, painted',
    ],
    [[{ ...arc(10, 90), rays: [0, 45, 90].map(ray) }], 60, 'A blue arc 1.4 arcsec to the north-east, painted'],
    [[arc(0, 360)], 150, 'A bright blue ring 1.4 arcsec from the middle,'],
    [
      [arc(90, 20), arc(180, 20), arc(270, 20), arc(0, 20)],
      20,
      'A faint blue image 1.4 arcsec to the east and three more round the galaxy,',
    ],
  ])('says what is where: %#', (arcs, strength, sentence) => {
    expect(explainPainting(truth(arcs, strength))).toContain(sentence)
    expect(explainPainting(truth(arcs, strength))).toContain('Einstein radius 1.3 arcsec.')
  })

  it('counts position angles from north through east', () => {
    expect([0, 90, 180, 270, 359, -45, 405].map(directionOf)).toEqual([
      'north',
      'east',
      'south',
      'west',
      'north',
      'north-west',
      'north-east',
    ])
  })
})

describe('names of calibration stamps', () => {
  const random = () => new SeededRandom(3)

  it('fill the gaps of numbered names, with as many digits', () => {
    const known = ['SWS0100', 'SWS0200', 'SWS0300']
    const [first] = proposeNames(known, null, 4, random())
    expect(first).toMatch(/^SWS0[123]\d\d$/)
    expect(known).not.toContain(first)
  })

  it('go on behind the last where there are no gaps', () => {
    const known = Array.from({ length: 30 }, (_, k) => `SWS${String(k + 1).padStart(4, '0')}`)
    const [first] = proposeNames(known, null, 4, random())
    expect(Number(first.slice(3))).toBeGreaterThan(30)
    expect(Number(first.slice(3))).toBeLessThanOrEqual(42)
  })

  // IAU rule: coordinates truncated. RA 150.25 degrees is 10h01m00s.
  it('are made of the position where the survey names places', () => {
    const known = ['SWS J095959.99-021500.0', 'SWS J100101.00-021500.0']
    expect(proposeNames(known, { raDeg: 150.25, decDeg: -2.5 }, 1, random())[0]).toBe('SWS J100100.00-023000.0')
    expect(proposeNames(['J0959+0215'], null, 1, random())[0]).not.toBe('')
  })
})

describe('an order', () => {
  const order = { ranges: USUAL_RANGES, galaxies: [1, 2, 2], lenses: 1, others: 1, seed: 4 }

  it('takes each galaxy once', () => {
    expect(OrderInput.parse(order).galaxies).toEqual([1, 2])
  })

  it('is refused with a sentence where it asks for more than is chosen, for none, or of ranges that cannot be', () => {
    const messages = (input: unknown) => OrderInput.safeParse(input).error?.issues.map(({ message }) => message)
    expect(messages({ ...order, lenses: 2 })).toEqual([
      '3 stamps take as many galaxies, and 2 are chosen. Choose more, or make fewer.',
    ])
    expect(messages({ ...order, lenses: 0, others: 0 })).toEqual(['Say how many are to be made.'])
    expect(messages({ ...order, ranges: { ...USUAL_RANGES, sourceOffset: [0.5, 0.2] } })).toEqual([
      expect.stringContaining('the lower end comes first.'),
    ])
  })
})
