import { describe, expect, it } from 'vitest'
import { readFixture } from '@/lib/science/agreement/_fixtures'
import { fleissKappa, subjectsRatedBy } from '@/lib/science/agreement/fleiss-kappa'

const gwet = readFixture('gwet-missing.json')
const reference = readFixture('fleiss-1971.json')

describe('fleissKappa', () => {
  // Fleiss (1971), Psychological Bulletin 76, 378, Table 1: kappa 0.430; exactly 5437/12637.
  it('equals Fleiss (1971), Table 1', () => {
    const result = fleissKappa(reference.counts)
    expect(result.kappa).toBeCloseTo(5437 / 12637, 12)
    expect(result.kappa).toBeCloseTo(reference.expected.published_kappa, 3)
    expect(result.observed).toBeCloseTo(reference.expected.mean_observed_agreement, 9)
    expect(result.expected).toBeCloseTo(reference.expected.chance_agreement, 9)
    expect(result).toMatchObject({ subjects: 30, form: 'equal', reason: null })
  })

  // Gwet's handbook, 12 units and 4 raters with missing ratings; printed by fleiss.kappa.raw of R irrCAC to 5 digits.
  it('equals the generalisation of Gwet (2014) where the numbers of ratings differ', () => {
    const [set] = gwet.sets
    const counts = set.ratings.map((row) =>
      [0, 1, 2, 3, 4].map((grade) => row.filter((rating) => rating === grade).length),
    )
    const result = fleissKappa(counts)
    expect(result.kappa).toBeCloseTo(set.fleiss_irrCAC?.kappa as number, 5)
    expect(result.observed).toBeCloseTo(set.fleiss_irrCAC?.pa as number, 7)
    expect(result.expected).toBeCloseTo(set.fleiss_irrCAC?.pe as number, 7)
    expect(result).toMatchObject({ subjects: 11, form: 'unequal' })
  })

  it('leaves out subjects that nobody rated', () => {
    expect(fleissKappa([...reference.counts, [0, 0, 0, 0, 0]])).toEqual(fleissKappa(reference.counts))
  })

  it("can be held to Fleiss' own restriction by taking the subjects with one number of ratings", () => {
    const mixed = [...reference.counts, [2, 0, 0, 0, 0], [1, 1, 1, 1, 1]]
    expect(fleissKappa(mixed).form).toBe('unequal')
    expect(fleissKappa(subjectsRatedBy(mixed, 6))).toEqual(fleissKappa(reference.counts))
  })

  it('is 1 for full agreement and -1 / (n - 1) for the fullest disagreement of n raters', () => {
    expect(
      fleissKappa([
        [3, 0],
        [0, 3],
      ]).kappa,
    ).toBe(1)
    expect(
      fleissKappa([
        [1, 1],
        [1, 1],
      ]).kappa,
    ).toBe(-1)
  })

  it('is undefined, with the reason, where nothing can be compared or nothing varies', () => {
    expect(fleissKappa([])).toMatchObject({ kappa: null, observed: null, expected: null, subjects: 0 })
    expect(
      fleissKappa([
        [1, 0],
        [0, 1],
      ]),
    ).toMatchObject({ kappa: null, reason: expect.stringContaining('two ratings') })
    expect(
      fleissKappa([
        [3, 0],
        [2, 0],
      ]),
    ).toMatchObject({
      kappa: null,
      observed: 1,
      expected: 1,
      reason: expect.stringContaining('the same'),
    })
  })

  it('refuses rows that are no counts, naming the subject', () => {
    expect(() =>
      fleissKappa([
        [1, 1],
        [1, 1, 1],
      ]),
    ).toThrow('Subject 2 has 3 counts where the first has 2.')
    expect(() =>
      fleissKappa([
        [1, 1],
        [1.5, 1],
      ]),
    ).toThrow('Subject 2 holds the count 1.5')
    expect(() => fleissKappa([[1, NaN]])).toThrow('Subject 1 holds the count NaN')
  })
})
