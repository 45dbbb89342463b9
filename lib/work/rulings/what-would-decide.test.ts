import { describe, expect, it } from 'vitest'
import { whatWouldChange, whatWouldDecide } from './what-would-decide'

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

describe('what would change a verdict by the mean', () => {
  it('counts the opposite grades that undo it and names the letters that it hangs on', () => {
    // A, A, B, C: mean 2. One N: 8/5 = 1.6, all wanted looks in: split. Without an A: 6/3 = 2: confirmed still. Without the B:
    // 7/3 and spread 0.94; without the C: 8/3.
    expect(whatWouldChange(RULE, given('AABC'))).toEqual([
      'One more N would make it split.',
      'No grade left out by itself would change it.',
    ])
    // A, B, B, C: mean 2. Without the A: 5/3 and a look to come: open. Without one B: 2.
    expect(whatWouldChange(RULE, given('ABBC'))).toEqual([
      'One more N would make it split.',
      'Without the A it would be open.',
    ])
  })

  it('of a candidate that is set aside by all', () => {
    // N, N, N, N with A: mean 0.6, spread 1.2: split.
    expect(whatWouldChange(RULE, given('NNNN'))).toEqual([
      'One more A would make it split.',
      'No grade left out by itself would change it.',
    ])
  })

  it('of a split says what would decide it', () => {
    expect(whatWouldChange(RULE, given('BBCC'))).toEqual(whatWouldDecide(RULE, given('BBCC')))
  })
})
