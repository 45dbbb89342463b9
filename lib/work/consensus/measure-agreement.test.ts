import { describe, expect, it } from 'vitest'
import { measureAgreement } from './measure-agreement'

describe('agreement of a campaign', () => {
  it('takes kappa over the largest group of candidates with equally many grades, and says which', () => {
    // By hand from Fleiss (1971): three candidates with the grades 3+0, 2+1 and 0+3 of two kinds. Po = (1 + 1/3 + 1) / 3 = 7/9,
    // shares 5/9 and 4/9, Pe = 41/81, kappa = (63/81 - 41/81) / (40/81) = 22/40.
    const measured = measureAgreement([
      [3, 0, 0, 0],
      [2, 1, 0, 0],
      [0, 3, 0, 0],
      [1, 1, 0, 0],
      [0, 0, 0, 1],
      [0, 0, 0, 0],
    ])
    expect(measured.fleissKappa).toBeCloseTo(22 / 40, 12)
    expect(measured.kappaNote).toBe(
      'Over 3 of 5 graded candidates, those with exactly 3 grades: it is defined for equal numbers.',
    )
    expect(measured.alphaNote).toBe('Over 11 grades of the 4 candidates that have two or more.')
  })

  it('takes the group with more grades where two are equally large', () => {
    const rows = [
      [1, 1, 0, 0],
      [2, 1, 0, 0],
    ]
    expect(measureAgreement(rows).kappaNote).toContain('exactly 3 grades')
    expect(measureAgreement(rows.toReversed()).kappaNote).toContain('exactly 3 grades')
  })

  it('has no number and says why where nothing can be compared or all grades are the same', () => {
    const nothing = { alphaOrdinal: null, fleissKappa: null }
    const lonely = measureAgreement([[0, 1, 0, 0]])
    expect(lonely).toMatchObject(nothing)
    expect(lonely.alphaNote).toContain('nothing to compare')
    expect(lonely.kappaNote).toContain('nothing to compare')
    const same = measureAgreement([
      [0, 0, 0, 3],
      [0, 0, 0, 3],
    ])
    expect(same).toMatchObject(nothing)
    expect(same.kappaNote).toContain('All ratings are the same')
    expect(measureAgreement([])).toMatchObject(nothing)
  })

  it('takes a wider gap between grades for a greater disagreement', () => {
    // By definition of the ordinal difference; the numbers themselves are held to the reference panel in run-consensus.test.ts.
    const rest = [
      [0, 1, 2, 0],
      [0, 0, 1, 2],
    ]
    const wide = measureAgreement([[2, 0, 0, 1], ...rest]).alphaOrdinal ?? NaN
    const near = measureAgreement([[2, 1, 0, 0], ...rest]).alphaOrdinal ?? NaN
    expect(wide).toBeLessThan(near)
  })
})
