import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { readFixture, readPanel } from '@/lib/science/agreement/_fixtures'
import {
  krippendorffAlpha,
  krippendorffAlphaFromCounts,
  type AlphaMetric,
} from '@/lib/science/agreement/krippendorff-alpha'

const panel = readFixture('panel.json')
const reference = readFixture('krippendorff-2011.json')

const METRICS: AlphaMetric[] = ['nominal', 'ordinal', 'interval']
type Ratings = (number | null)[][]

const transpose = (rows: Ratings): Ratings => rows[0].map((_, unit) => rows.map((row) => row[unit]))
const countsOf = (units: Ratings, values: number[]) =>
  units.map((row) => values.map((value) => row.filter((rating) => rating === value).length))

// Krippendorff (2011), Computing Krippendorff's Alpha-Reliability, sections A, B and C-D; the encyclopedia's example of
// 3 coders and 15 units. Published to three digits, exact fractions of the same data beside them.
const cases = Object.entries(reference.sets).flatMap(([name, set]) =>
  Object.entries(set.alpha).map(([metric, alpha]) => ({
    name,
    metric: metric as AlphaMetric,
    units: transpose(set.raters as Ratings),
    alpha: alpha.value,
    published: (set.published as Record<string, number>)[metric],
    pairable: set.pairable,
  })),
)

describe('krippendorffAlpha', () => {
  it.each(cases)(
    'equals the published $metric alpha of example $name',
    ({ units, metric, alpha, published, pairable }) => {
      const result = krippendorffAlpha(units, metric)
      expect(result.alpha).toBeCloseTo(alpha, 9)
      expect(result.alpha).toBeCloseTo(published, 3)
      expect(result.pairableValues).toBe(pairable)
      expect(result.reason).toBeNull()
    },
  )

  it.each(cases)('is the same from counts: $metric, example $name', ({ units, metric, alpha, pairable }) => {
    const result = krippendorffAlphaFromCounts(countsOf(units, [0, 1, 2, 3, 4, 5]), [0, 1, 2, 3, 4, 5], metric)
    expect(result.alpha).toBeCloseTo(alpha, 9)
    expect(result.pairableValues).toBe(pairable)
  })

  it('leaves a unit with one rating out of n and of the value counts (unit 12 of example C)', () => {
    const units = transpose(reference.sets.C.raters as Ratings)
    expect(units.flat().filter((value) => value !== null)).toHaveLength(41)
    expect(krippendorffAlpha(units, 'ordinal')).toMatchObject({ pairableUnits: 11, pairableValues: 40 })
    expect(krippendorffAlpha(units.slice(0, 11), 'ordinal')).toEqual(krippendorffAlpha(units, 'ordinal'))
  })

  // Panel made by numpy's seeded generator; alpha by exact fractions, R irr and the Python package krippendorff.
  it.each(METRICS)('equals the reference libraries on the seeded panel: %s', (metric) => {
    const units = readPanel().ratings
    const expected = panel.krippendorff_alpha
    expect(krippendorffAlpha(units, metric).alpha).toBeCloseTo(expected[metric], 9)
    expect(krippendorffAlpha(units, metric).pairableValues).toBe(expected.pairable)
    expect(krippendorffAlphaFromCounts(countsOf(units, [0, 1, 2, 3]), [0, 1, 2, 3], metric).alpha).toBeCloseTo(
      expected[metric],
      9,
    )
  })

  it('is undefined, with the reason, where nothing can be compared or nothing varies', () => {
    for (const metric of METRICS) {
      expect(krippendorffAlpha([], metric)).toMatchObject({
        alpha: null,
        reason: expect.stringContaining('two ratings'),
      })
      expect(krippendorffAlpha([[1, null], [null, 2], [null]], metric)).toMatchObject({ alpha: null, pairableUnits: 0 })
      // The only other value is in a unit with one rating, which does not count.
      expect(krippendorffAlpha([[2, 2], [2, 2, 2], [3]], metric)).toMatchObject({
        alpha: null,
        pairableUnits: 2,
        pairableValues: 5,
        reason: expect.stringContaining('the same'),
      })
    }
  })

  it('is 1 for full agreement and below 0 for systematic disagreement', () => {
    for (const metric of METRICS) {
      expect(
        krippendorffAlpha(
          [
            [0, 0],
            [3, 3],
            [1, 1],
          ],
          metric,
        ).alpha,
      ).toBe(1)
      expect(
        krippendorffAlpha(
          [
            [0, 3],
            [3, 0],
          ],
          metric,
        ).alpha,
      ).toBeLessThan(0)
    }
  })

  it('equals the definition over all pairs of ratings, for any ratings', () => {
    const units = fc.array(fc.array(fc.option(fc.integer({ min: 0, max: 4 })), { maxLength: 6 }), { maxLength: 8 })
    fc.assert(
      fc.property(units, fc.constantFrom(...METRICS), (ratings, metric) => {
        const expected = alphaByPairs(ratings, metric)
        const { alpha } = krippendorffAlpha(ratings, metric)
        if (expected === null) expect(alpha).toBeNull()
        else expect(alpha).toBeCloseTo(expected, 9)
      }),
    )
  })

  it('keeps its digits for interval values far from zero', () => {
    const units = [
      [1, 2],
      [3, 3],
      [2, 2],
      [1, 1],
    ]
    const far = units.map((row) => row.map((value) => value + 1e9))
    expect(krippendorffAlpha(far, 'interval').alpha).toBeCloseTo(
      krippendorffAlpha(units, 'interval').alpha as number,
      9,
    )
  })

  it('refuses what is no rating and no count, naming the unit', () => {
    expect(() =>
      krippendorffAlpha(
        [
          [1, 2],
          [1, NaN],
        ],
        'nominal',
      ),
    ).toThrow('Unit 2 holds NaN, which is not a finite number.')
    expect(() =>
      krippendorffAlphaFromCounts(
        [
          [1, 1],
          [1, -1],
        ],
        [0, 1],
        'nominal',
      ),
    ).toThrow('Unit 2 holds the count -1')
    expect(() => krippendorffAlphaFromCounts([[1, 1, 1]], [0, 1], 'nominal')).toThrow(
      'Unit 1 has 3 counts for 2 categories.',
    )
    expect(() => krippendorffAlphaFromCounts([[1, 1]], [1, 0], 'ordinal')).toThrow('must be finite and ascend')
  })
})

/** Do and De straight from the definition in Krippendorff (2011), over every ordered pair of ratings. */
function alphaByPairs(ratings: Ratings, metric: AlphaMetric): number | null {
  const units = ratings.map((row) => row.filter((value) => value !== null)).filter((row) => row.length > 1)
  const all = units.flat()
  const countBetween = (low: number, high: number) => all.filter((value) => value >= low && value <= high).length
  const difference = (a: number, b: number): number => {
    if (metric === 'nominal') return a === b ? 0 : 1
    if (metric === 'interval') return (a - b) ** 2
    const [low, high] = a < b ? [a, b] : [b, a]
    return (countBetween(low, high) - (countBetween(low, low) + countBetween(high, high)) / 2) ** 2
  }
  const overPairs = (row: number[]) =>
    row.reduce((sum, a, i) => sum + row.reduce((inner, b, j) => inner + (i === j ? 0 : difference(a, b)), 0), 0)
  const expected = overPairs(all) / (all.length * (all.length - 1))
  if (!(expected > 0)) return null
  return 1 - units.reduce((sum, row) => sum + overPairs(row) / (row.length - 1), 0) / all.length / expected
}
