import { describe, expect, it } from 'vitest'
import { whatWouldDecide } from './what-would-decide'

const RULE = { gradesWanted: 4, leastGrades: 3, confirmMean: 2, setAsideMean: 1, splitSpread: 1 }
const given = (letters: string) => [...letters].map((grade) => ({ grade: grade as 'A' }))

describe('what would decide a split', () => {
  it('counts the equal grades that it takes to confirm and to set aside', () => {
    // B, B, C, C: mean 1.5. With A: 9/5 = 1.8; with A, A: 12/6 = 2, spread sqrt(4/6) = 0.82: confirmed.
    // With N: 6/5 = 1.2; with N, N: 6/6 = 1, spread 0.82: set aside.
    expect(whatWouldDecide(RULE, given('BBCC'))).toEqual([
      'Two more A grades would confirm it.',
      'Two more N grades would set it aside.',
    ])
  })

  it('says what the candidate would be without the grade that stands alone', () => {
    // A, A, A, N: spread sqrt(27/16) = 1.30. Without the N: mean 3, spread 0.
    expect(whatWouldDecide(RULE, given('AAAN'))).toContain('Without the N it would be confirmed, with a mean of 3.00.')
    expect(whatWouldDecide(RULE, given('ANNN'))).toContain('Without the A it would be set aside, with a mean of 0.00.')
  })

  it('sends the lead to a ruling where no few grades would decide', () => {
    expect(whatWouldDecide({ ...RULE, splitSpread: 0.2 }, given('ABCN'))).toEqual([
      'Not even 4 more equal grades would decide it: it takes a ruling.',
    ])
  })

  it('counts for a candidate that nobody could judge', () => {
    expect(whatWouldDecide(RULE, given('UUUU'))).toEqual([
      'Three more A grades would confirm it.',
      'Three more N grades would set it aside.',
    ])
  })
})
