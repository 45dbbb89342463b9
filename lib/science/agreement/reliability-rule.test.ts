import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { Answer } from '@/lib/science/agreement/grades'
import {
  decideByReliability,
  DEFAULT_RELIABILITY_RULE,
  reliabilityRuleProblems,
  type ReliabilityAnswer,
  type ReliabilityRule,
} from '@/lib/science/agreement/reliability-rule'

/** Weights ln 30, ln 5, -ln 2, -ln 16. */
const sharp = { lens: [0.6, 0.25, 0.1, 0.05], notLens: [0.02, 0.05, 0.2, 0.8] }
/** Weights ln 2, 0, 0, -ln 2. */
const dull = { lens: [0.4, 0.2, 0.2, 0.2], notLens: [0.2, 0.2, 0.2, 0.4] }

const rule: ReliabilityRule = { falseConfirmed: 0.01, missedLens: 0.1, leastGrades: 2, mostLooks: 4 }
const of = (grader: string, grade: Answer, rates = sharp): ReliabilityAnswer => ({ grader, grade, rates })
const decide = (answers: ReliabilityAnswer[], lensShare = 0.1) => decideByReliability(rule, answers, lensShare)

describe('decideByReliability', () => {
  // Boundaries ln 90 and ln(0.1 / 0.99); posterior odds 1/9 * 30 * 5 by hand.
  it('confirms when the weights reach the upper boundary, and names them', () => {
    const decision = decide([of('curlew', 'B'), of('avocet', 'A')])
    expect(decision).toMatchObject({ outcome: 'confirmed', n: 2, cannotJudge: 0, mean: 2.5, spread: 0.5 })
    expect(decision.evidence).toBeCloseTo(Math.log(150), 12)
    expect(decision.probability).toBeCloseTo(150 / 9 / (1 + 150 / 9), 12)
    expect(decision.reason).toBe(
      'Confirmed: the probability of a lens is 0.94, at or above 0.91. Before any grade it was 0.10. ' +
        'The A of avocet speaks strongly for a lens (odds times 30). The B of curlew speaks clearly for a lens (odds times 5.0).',
    )
  })

  it('sets aside when they reach the lower one', () => {
    const decision = decide([of('avocet', 'N'), of('dunlin', 'N', dull)])
    expect(decision.outcome).toBe('set aside')
    expect(decision.evidence).toBeCloseTo(-Math.log(32), 12)
    expect(decision.reason).toContain('The N of avocet speaks strongly against a lens (odds divided by 16).')
    expect(decision.reason).toContain('The N of dunlin speaks somewhat against a lens (odds divided by 2.0).')
  })

  it('counts a grade by who gave it: two A of a dull grader do not confirm what two of a sharp one do', () => {
    expect(decide([of('avocet', 'A'), of('curlew', 'A')]).outcome).toBe('confirmed')
    expect(decide([of('avocet', 'A', dull), of('curlew', 'A', dull)]).outcome).toBe('open')
  })

  it('stays open between the boundaries while looks are to come, and is split when they are in', () => {
    const torn = [of('avocet', 'A'), of('curlew', 'N')]
    expect(decide(torn).reason).toMatch(/^Open: .* between 0\.01 and 0\.91; at most 2 more looks to come\./)
    const all = [...torn, of('dunlin', 'B', dull), of('plover', 'U')]
    expect(decide(all)).toMatchObject({ outcome: 'split', n: 3, cannotJudge: 1 })
    expect(decide(all).reason).toMatch(/and all 4 looks are in\..* 1 look could not judge\.$/)
    expect(decide(all).reason).toContain('The B of dunlin says nothing either way (odds unchanged).')
  })

  it('decides nothing before the least grades, and splits when too many could not judge', () => {
    expect(decide([of('avocet', 'A')])).toMatchObject({ outcome: 'open', n: 1 })
    expect(decide([])).toMatchObject({ outcome: 'open', n: 0, mean: null, spread: null, evidence: 0 })
    expect(decide([]).probability).toBeCloseTo(0.1, 12)
    const blank = ['curlew', 'dunlin', 'plover'].map((grader) => of(grader, 'U'))
    expect(decide([of('avocet', 'A'), ...blank])).toMatchObject({ outcome: 'split', n: 1, cannotJudge: 3 })
  })

  it('does not let the share of lenses change the outcome, only the probability', () => {
    const answers = [of('avocet', 'A'), of('curlew', 'B')]
    expect(decide(answers, 0.001).outcome).toBe(decide(answers, 0.5).outcome)
    expect(decide(answers, 0.001).probability).toBeLessThan(decide(answers, 0.5).probability)
  })

  it('is the same to the last bit for any order of the answers', () => {
    const answer = fc.record({
      grader: fc.constantFrom('avocet', 'curlew', 'dunlin'),
      grade: fc.constantFrom<Answer>('A', 'B', 'C', 'N', 'U'),
      rates: fc.constantFrom(sharp, dull),
    })
    const pair = fc
      .array(answer, { maxLength: 8 })
      .chain((answers) => fc.tuple(fc.constant(answers), fc.shuffledSubarray(answers, { minLength: answers.length })))
    fc.assert(
      fc.property(pair, ([one, other]) => {
        expect(decide(one)).toEqual(decide(other))
      }),
    )
  })

  it('shows enough digits to tell a probability from the boundary and from 0 and 1', () => {
    expect(decide([of('avocet', 'A'), of('curlew', 'A'), of('dunlin', 'A')], 0.5).reason).toContain('is 0.99996,')
    expect(decide([of('avocet', 'N'), of('curlew', 'N')], 0.02).reason).toContain('is 0.0001,')
  })
})

describe('a rule by reliability that cannot be used', () => {
  it.each([
    [{ falseConfirmed: 0 }, 'The share of non-lenses that may be confirmed is 0; it must be between 0 and 1.'],
    [{ missedLens: 1.5, falseConfirmed: 0.1 }, 'The share of lenses that may be set aside is 1.5; it must be between 0 and 1.'], // prettier-ignore
    [{ leastGrades: 5 }, 'The least number of grades (5) is above the most looks (4).'],
    [{ mostLooks: 4.5 }, 'The most looks must be a whole number from 1 up.'],
  ])('is refused with what is wrong: %j', (change, sentence) => {
    expect(reliabilityRuleProblems({ ...rule, ...change })).toContain(sentence)
    expect(() => decideByReliability({ ...rule, ...change }, [], 0.1)).toThrow(sentence)
  })

  it('is not the default; and a share of lenses must be inside 0 and 1', () => {
    expect(reliabilityRuleProblems(DEFAULT_RELIABILITY_RULE)).toEqual([])
    expect(() => decide([], 0)).toThrow('The share of lenses is 0')
  })
})
