import { describe, expect, it } from 'vitest'
import { readFixture } from '@/lib/science/agreement/_fixtures'
import { gwetAc, type GwetWeights } from '@/lib/science/agreement/gwet-ac'

const { sets } = readFixture('gwet-ac.json')

/** Counts of each unit; a table of two raters is units of two ratings each. */
function countsOf(set: (typeof sets)[number]): { counts: number[][]; multiplicity?: number[] } {
  const { ratings, categories, table } = set
  if (ratings && categories) {
    return { counts: ratings.map((row) => categories.map((c) => row.filter((rating) => rating === c).length)) }
  }
  const cells = (table ?? []).flatMap((row, i) => row.map((times, j) => ({ i, j, times })))
  return {
    counts: cells.map(({ i, j }) => [0, 1, 2].map((c) => Number(c === i) + Number(c === j))),
    multiplicity: cells.map(({ times }) => times),
  }
}

const cases = sets.flatMap((set) =>
  Object.entries(set.values).map(([weights, value]) => ({
    name: set.name,
    weights: weights as GwetWeights,
    ...countsOf(set),
    value,
  })),
)

describe('gwetAc', () => {
  // Data of Gwet (2021), Handbook of Inter-Rater Reliability, 5th ed., pp. 160 and 165, and of irrCAC cont3x3abstractors;
  // values from the handbook's formulas in numpy and from irrCAC.
  it.each(cases)(
    'equals the handbook formulas and irrCAC: $name, $weights',
    ({ counts, multiplicity, weights, value }) => {
      const result = gwetAc(counts, weights, multiplicity)
      expect(result.ac).toBeCloseTo(value.ac, 9)
      expect(result.observed).toBeCloseTo(value.pa, 9)
      expect(result.expected).toBeCloseTo(value.pe, 9)
      expect(result.reason).toBeNull()
    },
  )

  // Gwet (2021), p. 160: AC1 = 0.7754; p. 165: AC1 = 0.5021, AC2 with quadratic weights = 0.8224.
  it('equals the printed four digits', () => {
    const [first, second] = sets.map(countsOf)
    expect(gwetAc(first.counts).ac).toBeCloseTo(0.7754, 4)
    expect(gwetAc(second.counts).ac).toBeCloseTo(0.5021, 4)
    expect(gwetAc(second.counts, 'quadratic').ac).toBeCloseTo(0.8224, 4)
  })

  it('is 1 where all agree, though everything is in one category', () => {
    expect(gwetAc([[0, 0, 0, 6]])).toMatchObject({ ac: 1, observed: 1, expected: 0, units: 1 })
  })

  it('is undefined, with the reason, without a unit that has two ratings', () => {
    expect(gwetAc([[0, 1, 0, 0]])).toMatchObject({ ac: null, observed: null, units: 0 })
    expect(gwetAc([]).reason).toContain('nothing to compare')
  })

  it('refuses counts that do not fit', () => {
    expect(() => gwetAc([[1, 1], [1]])).toThrow('Unit 2 has 1 counts where the first has 2')
    expect(() => gwetAc([[1, -1]])).toThrow('finite and 0 or more')
    expect(() => gwetAc([[3]])).toThrow('two categories')
  })
})
