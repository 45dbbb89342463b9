import { describe, expect, it } from 'vitest'
import { readFixture, readPanel } from '@/lib/science/agreement/_fixtures'
import { cohenKappa, contingencyTable, type KappaWeights } from '@/lib/science/agreement/cohen-kappa'

const panel = readFixture('panel.json')
const reference = readFixture('cohen-kappa.json')

const NAMED = ['unweighted', 'linear', 'quadratic'] as const

describe('cohenKappa', () => {
  // Tables of Cohen (1960, 1968), Fleiss (1981) p. 213, the SAS FREQ documentation, R vcd; each names its source in the file.
  it.each(reference.tables)('equals the exact fractions for the table "$name"', (example) => {
    for (const weights of NAMED) {
      expect(cohenKappa(example.table, weights).kappa).toBeCloseTo(example.kappa[weights].kappa, 9)
    }
    expect(cohenKappa(example.table).observed).toBeCloseTo(example.observed, 9)
    expect(cohenKappa(example.table).expected).toBeCloseTo(example.chance, 9)
  })

  // Printed digits: 0.492 (Cohen 1960), 0.348 and 0.353 (Cohen 1968, Table 1, as quoted in the R package psych).
  it('equals the values that Cohen printed for his 200 diagnoses, with his own weights too', () => {
    const [diagnoses] = reference.tables
    expect(cohenKappa(diagnoses.table).kappa).toBeCloseTo(diagnoses.published.unweighted as number, 3)
    expect(diagnoses.custom).toHaveLength(2)
    for (const { weights, kappa, published } of diagnoses.custom) {
      const result = cohenKappa(diagnoses.table, weights as KappaWeights)
      expect(result.kappa).toBeCloseTo(kappa, 9)
      expect(result.kappa).toBeCloseTo(published, 3)
    }
  })

  // Maple EssayTools documentation, QuadraticWeightedKappa.
  it.each(reference.rating_vectors.vectors)('equals $exact for two printed vectors of marks', (vectors) => {
    const pairs = vectors.rater1.map((mark, i): [number, number] => [mark - 1, vectors.rater2[i] - 1])
    expect(cohenKappa(contingencyTable(pairs, 10), 'quadratic').kappa).toBeCloseTo(vectors.kappa_quadratic, 9)
  })

  // scikit-learn 1.2.1 cohen_kappa_score on the seeded panel, items that both rated.
  it('equals scikit-learn for every pair of the seeded panel', () => {
    const { raters, ratings } = readPanel()
    const ratingsOf = (rater: string) => ratings.map((row) => row[raters.indexOf(rater)])
    expect(panel.pairwise_kappa.pairs).toHaveLength(28)
    for (const expected of panel.pairwise_kappa.pairs) {
      const [first, second] = expected.pair.map(ratingsOf)
      const table = contingencyTable(
        first.map((rating, i): [number | null, number | null] => [rating, second[i]]),
        4,
      )
      expect(cohenKappa(table).units).toBe(expected.n)
      for (const weights of NAMED) expect(cohenKappa(table, weights).kappa).toBeCloseTo(expected[weights], 9)
    }
  })

  it('is undefined, with the reason, without shared units or when nothing varies', () => {
    expect(
      cohenKappa([
        [0, 0],
        [0, 0],
      ]),
    ).toMatchObject({ kappa: null, observed: null, expected: null, units: 0 })
    expect(
      cohenKappa([
        [7, 0],
        [0, 0],
      ]),
    ).toMatchObject({ kappa: null, observed: 1, reason: expect.stringContaining('same') })
  })

  it('refuses tables and ratings that do not fit', () => {
    expect(() => cohenKappa([[1, 2]])).toThrow('must be square')
    expect(() =>
      cohenKappa([
        [1, -2],
        [0, 1],
      ]),
    ).toThrow('0 or more')
    expect(() =>
      cohenKappa(
        [
          [1, 2],
          [0, 1],
        ],
        [[0]],
      ),
    ).toThrow('2 by 2 matrix')
    expect(() => contingencyTable([[0, 4]], 4)).toThrow('The ratings 0 and 4 are not both among the 4 categories')
  })
})
