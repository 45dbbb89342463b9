import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { GRADES, type Answer } from '@/lib/science/agreement/grades'
import { DEFAULT_MEAN_RULE, decide, meanRuleProblems, type MeanRule } from '@/lib/science/agreement/mean-rule'

/** Four grades wanted, decided from three, as in the demo campaign. */
const fromThree: MeanRule = { ...DEFAULT_MEAN_RULE, gradesWanted: 4, leastGrades: 3 }

function decideOn(grades: string, rule: MeanRule = fromThree) {
  return decide(
    rule,
    [...grades].map((grade) => ({ grade: grade as Answer })),
  )
}

describe('the rule of the mean', () => {
  // Means and spreads by hand: AAB = 8/3 and sqrt(2)/3; AAN = 2 and sqrt(2); CNN = 1/3 and sqrt(2)/3; BBC = 5/3.
  it.each([
    ['', 'open', 'Open: 0 of at least 3 grades so far.'],
    ['AA', 'open', 'Open: 2 of at least 3 grades so far.'],
    ['AAU', 'open', "Open: 2 of at least 3 grades so far, and 1 'cannot judge'."],
    ['AAB', 'confirmed', 'Confirmed: 3 grades with mean 2.67, at or above 2.00, and spread 0.47, within 1.00.'],
    ['BBB', 'confirmed', 'Confirmed: 3 grades with mean 2.00, at or above 2.00, and spread 0.00, within 1.00.'],
    [
      'AABU',
      'confirmed',
      "Confirmed: 3 grades with mean 2.67, at or above 2.00, and spread 0.47, within 1.00, and 1 'cannot judge'.",
    ],
    ['NCN', 'set aside', 'Set aside: 3 grades with mean 0.33, at or below 1.00, and spread 0.47, within 1.00.'],
    ['CCC', 'set aside', 'Set aside: 3 grades with mean 1.00, at or below 1.00, and spread 0.00, within 1.00.'],
    ['ANA', 'split', 'Split: grades A, A, N; the spread 1.41 is above 1.00.'],
    ['AACC', 'split', 'Split: grades A, A, C, C; the spread 1.00 is above 0.95.', { ...fromThree, splitSpread: 0.95 }],
    ['BCB', 'open', 'Open: grades B, B, C; the mean 1.67 is between 1.00 and 2.00; 1 more look to come.'],
    [
      'BCBC',
      'split',
      'Split: grades B, B, C, C; the mean 1.50 is between 1.00 and 2.00, and all 4 wanted looks are in.',
    ],
    [
      'BBCU',
      'split',
      "Split: grades B, B, C, and 1 'cannot judge'; the mean 1.67 is between 1.00 and 2.00, and all 4 wanted looks are in.",
    ],
    [
      'AAUU',
      'split',
      'Split: all 4 wanted looks are in, but 2 could not judge and only 2 of at least 3 grades were given.',
    ],
    [
      'UUUU',
      'split',
      'Split: all 4 wanted looks are in, but 4 could not judge and only 0 of at least 3 grades were given.',
    ],
  ] as [string, string, string, MeanRule?][])('makes of %s: %s', (grades, outcome, reason, rule) => {
    const decision = decideOn(grades, rule)
    expect(decision.reason).toBe(reason)
    expect(decision.outcome).toBe(outcome)
  })

  it('counts grades and cannot judge apart, and takes the mean of the grades alone', () => {
    expect(decideOn('AUU')).toMatchObject({ n: 1, cannotJudge: 2, mean: 3, spread: 0 })
    expect(decideOn('UU')).toMatchObject({ n: 0, cannotJudge: 2, mean: null, spread: null })
  })

  it('splits only above the spread, not at it', () => {
    expect(decideOn('AACC').spread).toBe(1)
    expect(decideOn('AACC').outcome).toBe('confirmed')
  })

  it('shows enough decimals to tell a mean from the threshold it just misses', () => {
    const rule = { ...fromThree, confirmMean: 2.67 }
    expect(decideOn('AAB', rule).reason).toBe(
      'Open: grades A, A, B; the mean 2.667 is between 1.00 and 2.67; 1 more look to come.',
    )
  })

  it('decides on more grades than wanted when a lead asked for more looks', () => {
    expect(decideOn('AAAABB').outcome).toBe('confirmed')
    expect(decideOn('BBCCBB').outcome).toBe('split')
  })

  it('gives the same decision for any order of the grades', () => {
    const answer = fc.constantFrom<Answer>(...GRADES, 'U')
    const pair = fc
      .array(answer, { maxLength: 9 })
      .chain((answers) => fc.tuple(fc.constant(answers), fc.shuffledSubarray(answers, { minLength: answers.length })))
    fc.assert(
      fc.property(pair, ([one, other]) => {
        expect(decideOn(one.join(''))).toEqual(decideOn(other.join('')))
      }),
    )
  })

  it('never confirms what would be set aside with every grade one step lower or the same', () => {
    const lower: Record<string, string> = { A: 'B', B: 'C', C: 'N', N: 'N' }
    const rank = { 'set aside': 0, open: 1, split: 1, confirmed: 2 }
    fc.assert(
      fc.property(fc.array(fc.constantFrom(...GRADES), { minLength: 4, maxLength: 4 }), (grades) => {
        const rule = { ...fromThree, splitSpread: 3 }
        const lowered = grades.map((grade) => lower[grade]).join('')
        expect(rank[decideOn(lowered, rule).outcome]).toBeLessThanOrEqual(rank[decideOn(grades.join(''), rule).outcome])
      }),
    )
  })

  it('never leaves a candidate open that has all its looks', () => {
    const answer = fc.constantFrom<Answer>(...GRADES, 'U')
    fc.assert(
      fc.property(fc.array(answer, { minLength: 6, maxLength: 9 }), (answers) => {
        expect(decideOn(answers.join(''), DEFAULT_MEAN_RULE).outcome).not.toBe('open')
      }),
    )
  })
})

describe('a rule that cannot be used', () => {
  it.each([
    [{ leastGrades: 7 }, 'The least number of grades (7) is above the number wanted (6).'],
    [{ setAsideMean: 2 }, 'The mean that sets aside (2) must be below the one that confirms (2).'],
    [{ confirmMean: 3.5 }, 'The mean that confirms must be between 0 and 3 points.'],
    [{ setAsideMean: -1 }, 'The mean that sets aside must be between 0 and 3 points.'],
    [{ gradesWanted: 6.5 }, 'The number of grades wanted must be a whole number from 1 up.'],
    [{ leastGrades: 0 }, 'The least number of grades must be a whole number from 1 up.'],
    [{ splitSpread: NaN }, 'The spread that makes a split must be 0 points or more.'],
  ])('is refused with what is wrong: %j', (change, sentence) => {
    const rule = { ...DEFAULT_MEAN_RULE, ...change }
    expect(meanRuleProblems(rule)).toEqual([sentence])
    expect(() => decide(rule, [])).toThrow(new RangeError(sentence))
  })

  it('is not the default, which asks for six grades and decides from four', () => {
    expect(meanRuleProblems(DEFAULT_MEAN_RULE)).toEqual([])
    expect(DEFAULT_MEAN_RULE).toMatchObject({ gradesWanted: 6, leastGrades: 4 })
  })
})
