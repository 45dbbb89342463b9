import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { Answer } from '@/lib/science/agreement/grades'
import { gradeCode, groupByCandidate } from '@/lib/science/agreement/grade-table'
import { decide, DEFAULT_MEAN_RULE } from '@/lib/science/agreement/mean-rule'
import {
  changedOutcomes,
  OUTCOMES,
  outcomesByMean,
  outcomesByReliability,
  tallyCandidates,
} from '@/lib/science/agreement/outcomes-at-once'
import { decideByReliability } from '@/lib/science/agreement/reliability-rule'

const rates = [
  { lens: [0.6, 0.25, 0.1, 0.05], notLens: [0.02, 0.05, 0.2, 0.73] },
  { lens: [0.4, 0.3, 0.2, 0.1], notLens: [0.1, 0.2, 0.3, 0.4] },
  { lens: [0.31, 0.3, 0.21, 0.18], notLens: [0.07, 0.13, 0.29, 0.51] },
]

function talliesOf(candidates: { grader: number; grade: Answer }[][]) {
  const entries = candidates.flatMap((answers, candidate) => answers.map((answer) => ({ ...answer, candidate })))
  const table = groupByCandidate({
    candidates: candidates.length,
    graders: rates.length,
    grades: 4,
    candidateOf: Int32Array.from(entries, ({ candidate }) => candidate),
    graderOf: Int32Array.from(entries, ({ grader }) => grader),
    gradeOf: Uint8Array.from(entries, ({ grade }) => gradeCode(grade)),
  })
  const cannotJudge = candidates.map((answers) => answers.filter(({ grade }) => grade === 'U').length)
  return tallyCandidates(table, rates, cannotJudge)
}

const answer = fc.record({ grader: fc.nat(2), grade: fc.constantFrom<Answer>('A', 'B', 'C', 'N', 'U') })
const candidates = fc.array(fc.array(answer, { maxLength: 9 }), { maxLength: 12 })

describe('outcomes of all candidates at once', () => {
  it('are those of the rule of the mean, one by one', () => {
    const rule = fc.record({
      gradesWanted: fc.constantFrom(4, 6),
      leastGrades: fc.constantFrom(1, 2, 4),
      confirmMean: fc.constantFrom(1.5, 2, 7 / 3),
      setAsideMean: fc.constantFrom(0.5, 1, 4 / 3),
      splitSpread: fc.constantFrom(0.5, 1, 3),
    })
    fc.assert(
      fc.property(candidates, rule, (all, given) => {
        const outcomes = [...outcomesByMean(talliesOf(all), given)].map((code) => OUTCOMES[code])
        expect(outcomes).toEqual(all.map((answers) => decide(given, answers).outcome))
      }),
    )
  })

  it('are those of the rule by reliability, one by one', () => {
    const rule = fc.record({
      falseConfirmed: fc.constantFrom(0.001, 0.03, 0.2),
      missedLens: fc.constantFrom(0.01, 0.1, 0.4),
      leastGrades: fc.constantFrom(1, 2, 4),
      mostLooks: fc.constantFrom(4, 8),
    })
    fc.assert(
      fc.property(candidates, rule, (all, given) => {
        const outcomes = [...outcomesByReliability(talliesOf(all), given)].map((code) => OUTCOMES[code])
        const named = (answers: { grader: number; grade: Answer }[]) =>
          answers.map(({ grader, grade }) => ({ grade, rates: rates[grader], grader: `grader ${grader}` }))
        expect(outcomes).toEqual(all.map((answers) => decideByReliability(given, named(answers), 0.02).outcome))
      }),
    )
  })

  it('are counted, and those that differ from before named', () => {
    const before = Uint8Array.from([0, 1, 2, 3, 2])
    const after = Uint8Array.from([0, 2, 2, 3, 3])
    expect(changedOutcomes(before, after)).toEqual({
      counts: { open: 1, split: 0, confirmed: 2, 'set aside': 2 },
      changed: [1, 4],
    })
  })

  it('are refused for rules that cannot be used', () => {
    expect(() => outcomesByMean(talliesOf([]), { ...DEFAULT_MEAN_RULE, leastGrades: 7 })).toThrow(
      'above the number wanted',
    )
    const wrong = { falseConfirmed: 0, missedLens: 0.1, leastGrades: 1, mostLooks: 2 }
    expect(() => outcomesByReliability(talliesOf([]), wrong)).toThrow('must be between 0 and 1')
  })
})
