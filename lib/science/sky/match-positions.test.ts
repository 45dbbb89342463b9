import { readFileSync } from 'node:fs'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { conePositions, nearestPositions } from './cone-positions'
import { matchPositions, matchWithin } from './match-positions'
import { indexPositions, type Positions } from './position-index'
import { separationArcsec } from './separation'

const positions = (...pairs: [number, number][]): Positions => ({
  raDeg: Float64Array.from(pairs, ([ra]) => ra),
  decDeg: Float64Array.from(pairs, ([, dec]) => dec),
})

const at = ({ raDeg, decDeg }: Positions, k: number) => ({ raDeg: raDeg[k], decDeg: decDeg[k] })

/** Every pair by the definition, for lists that are short. */
function pairsByDefinition(a: Positions, b: Positions, radius: number): [number, number][] {
  const pairs: [number, number][] = []
  for (let i = 0; i < a.raDeg.length; i++) {
    for (let j = 0; j < b.raDeg.length; j++) if (separationArcsec(at(a, i), at(b, j)) <= radius) pairs.push([i, j])
  }
  return pairs
}

const listed = ({ first, second }: { first: Uint32Array; second: Uint32Array }) =>
  Array.from(first, (place, k) => [place, second[k]])

// Crowded where it is hard: both poles, RA 0/360, and one small field; whole turns of RA beyond 360 too.
const hardPosition = fc.oneof(
  fc.tuple(fc.double({ min: 0, max: 360, noNaN: true }), fc.double({ min: 89.999, max: 90, noNaN: true })),
  fc.tuple(fc.double({ min: 0, max: 360, noNaN: true }), fc.double({ min: -90, max: -89.999, noNaN: true })),
  fc.tuple(fc.double({ min: -0.001, max: 0.001, noNaN: true }), fc.double({ min: -0.001, max: 0.001, noNaN: true })),
  fc.tuple(fc.double({ min: 359.999, max: 360, noNaN: true }), fc.double({ min: -0.001, max: 0.001, noNaN: true })),
  fc.tuple(fc.double({ min: 719.999, max: 720, noNaN: true }), fc.double({ min: 59.999, max: 60.001, noNaN: true })),
  fc.tuple(fc.double({ min: 0, max: 360, noNaN: true }), fc.double({ min: -90, max: 90, noNaN: true })),
)
const hardPositions = fc.array(hardPosition, { maxLength: 40 }).map((pairs) => positions(...pairs))
// A radius at which no pair stands to within rounding is as good as any: 1e-6 arcsec beside a round number.
const radius = fc.constantFrom(0.500001, 2.000001, 7.3, 60.1, 4000.3, 200000.7, 648000)

describe('matching two lists of positions', () => {
  // fixtures/sky/matching.json: mpmath with 50 digits and astropy 5.2.1.
  const { rows } = JSON.parse(readFileSync('fixtures/sky/matching.json', 'utf8')) as {
    rows: Record<
      'case' | 'ra1_deg' | 'dec1_deg' | 'ra2_deg' | 'dec2_deg' | 'high_precision_separation_arcsec',
      number
    >[]
  }

  it.each(rows)('finds the pair at its separation and not within less: $case', (row) => {
    const separation = row.high_precision_separation_arcsec
    const [a, b] = [positions([row.ra1_deg, row.dec1_deg]), positions([row.ra2_deg, row.dec2_deg])]
    const pairs = matchPositions(a, b, Math.min(648000, separation + 1e-9))
    expect(listed(pairs)).toEqual([[0, 0]])
    expect(Math.abs(pairs.separationArcsec[0] - separation)).toBeLessThan(1e-9)
    if (separation > 1e-8) expect(matchPositions(a, b, separation - 1e-9).first.length).toBe(0)
  })

  it('finds the pairs of the definition, in order, everywhere on the sphere and at any radius', () => {
    fc.assert(
      fc.property(hardPositions, hardPositions, radius, (a, b, within) => {
        expect(listed(matchPositions(a, b, within))).toEqual(pairsByDefinition(a, b, within))
      }),
      { numRuns: 300 },
    )
  })

  it('finds each pair within one list once', () => {
    fc.assert(
      fc.property(hardPositions, radius, (list, within) => {
        const expected = pairsByDefinition(list, list, within).filter(([i, j]) => i < j)
        expect(listed(matchWithin(list, within))).toEqual(expected)
      }),
    )
  })

  it('does not see the whole turn: RA 0 and 360 are one place, at any declination', () => {
    expect(listed(matchPositions(positions([0, 45]), positions([360, 45], [-360, 45]), 0.001))).toEqual([
      [0, 0],
      [0, 1],
    ])
  })

  it('matches every right ascension at a pole', () => {
    expect(matchPositions(positions([10, 90]), positions([190, 90], [300, 90]), 0.001).first.length).toBe(2)
    expect(matchPositions(positions([10, -90]), positions([190, -90], [5, 90]), 0.001).first.length).toBe(1)
  })

  it('pairs nothing with a position that is not on the sphere', () => {
    const good = positions([1, 1], [NaN, NaN])
    const list = positions([NaN, 1], [1, NaN], [Infinity, 1], [1, 90.5], [1, 1])
    expect(listed(matchPositions(good, list, 648000))).toEqual([[0, 4]])
  })

  it('finds nothing in empty lists', () => {
    expect(matchPositions(positions(), positions([1, 1]), 10).first.length).toBe(0)
    expect(matchPositions(positions([1, 1]), positions(), 10).first.length).toBe(0)
  })

  it('refuses a radius off the sphere and arrays of two lengths', () => {
    expect(() => matchPositions(positions(), positions(), -1)).toThrow('between 0 and 648000 arcsec; -1 does not')
    expect(() => matchPositions(positions(), positions(), NaN)).toThrow('NaN does not')
    const uneven = { raDeg: new Float64Array(2), decDeg: new Float64Array(1) }
    expect(() => matchPositions(uneven, positions(), 1)).toThrow('2 right ascensions for 1 declinations')
  })
})

describe('searching a cone', () => {
  it('finds what the definition finds, nearest first', () => {
    fc.assert(
      fc.property(hardPositions, hardPosition, radius, (list, [ra, dec], within) => {
        const centre = { raDeg: ra, decDeg: dec }
        const cone = conePositions(indexPositions(list), centre, within)
        const expected = pairsByDefinition(positions([ra, dec]), list, within).map(([, place]) => place)
        expect([...cone.places].sort((x, y) => x - y)).toEqual(expected)
        expect([...cone.separationArcsec]).toEqual([...cone.separationArcsec].sort((x, y) => x - y))
      }),
    )
  })

  it('finds nothing round a centre that is not on the sphere', () => {
    const index = indexPositions(positions([1, 1]))
    expect(conePositions(index, { raDeg: NaN, decDeg: 1 }, 648000).places.length).toBe(0)
    expect(conePositions(index, { raDeg: 1, decDeg: -91 }, 648000).places.length).toBe(0)
  })
})

describe('the nearest position', () => {
  it('is nearest by the definition, near and far', () => {
    fc.assert(
      fc.property(hardPositions, hardPositions, (a, b) => {
        const nearest = nearestPositions(a, b)
        for (let k = 0; k < a.raDeg.length; k++) {
          const separations = Array.from(b.raDeg, (_, j) => separationArcsec(at(a, k), at(b, j)))
          const expected = separations.length === 0 ? NaN : Math.min(...separations)
          if (Number.isNaN(expected)) expect(nearest.place[k]).toBe(-1)
          else expect(Math.abs(nearest.separationArcsec[k] - expected)).toBeLessThan(1e-8)
        }
      }),
    )
  })

  it('is none where none is near enough', () => {
    const nearest = nearestPositions(positions([10, 10], [20, 20], [NaN, 0]), positions([10, 10.0001]), 2)
    expect([...nearest.place]).toEqual([0, -1, -1])
    expect(nearest.separationArcsec[0]).toBeCloseTo(0.36, 9)
    expect(nearest.separationArcsec[1]).toBeNaN()
  })
})
