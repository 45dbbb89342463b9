import { describe, expect, it } from 'vitest'
import {
  errorRatesToDecide,
  fewestToOverturn,
  oneMoreGrade,
  overturningGrades,
  withoutEachAnswer,
  type VerdictBasis,
} from '@/lib/science/agreement/overturn-verdict'
import { decideByReliability, type ReliabilityAnswer } from '@/lib/science/agreement/reliability-rule'

/** Weights ln 30, ln 5, -ln 2, -ln 16; boundaries ln 90 and ln(0.1 / 0.99). */
const rates = { lens: [0.6, 0.25, 0.1, 0.05], notLens: [0.02, 0.05, 0.2, 0.8] }
const rule = { falseConfirmed: 0.01, missedLens: 0.1, leastGrades: 2, mostLooks: 4 }
const basis = (...grades: ReliabilityAnswer['grade'][]): VerdictBasis => ({
  rule,
  lensShare: 0.1,
  answers: grades.map((grade, at) => ({ grade, rates, grader: ['avocet', 'curlew', 'dunlin', 'plover'][at] })),
})

describe('what would have changed a verdict', () => {
  it('shows each answer left out: without its A, three grades no longer confirm', () => {
    const without = withoutEachAnswer(basis('A', 'B', 'B'))
    expect(without.map(({ outcome }) => outcome)).toEqual(['open', 'confirmed', 'confirmed'])
    expect(without[0].probability).toBeCloseTo(25 / 9 / (1 + 25 / 9), 12)
  })

  it('lists the grades that would have led elsewhere', () => {
    expect(overturningGrades(basis('A', 'B'))).toEqual([
      { answer: 0, instead: 'B', outcome: 'open' },
      { answer: 0, instead: 'C', outcome: 'open' },
      { answer: 0, instead: 'N', outcome: 'open' },
      { answer: 1, instead: 'C', outcome: 'open' },
      { answer: 1, instead: 'N', outcome: 'open' },
    ])
  })

  it('finds the fewest answers to leave out', () => {
    expect(fewestToOverturn(basis('B', 'A', 'B'))).toEqual([1])
    expect(fewestToOverturn(basis('A', 'A', 'B'))).toEqual([0, 1])
    expect(fewestToOverturn(basis('N', 'C', 'N', 'N'))).toEqual([0, 2, 3])
  })

  it('has none to leave out where nothing is decided', () => {
    expect(fewestToOverturn(basis('A', 'N'))).toBeNull()
    expect(fewestToOverturn(basis())).toBeNull()
  })

  it('says what one more grade would make of it', () => {
    const next = oneMoreGrade(basis('A', 'C'), { grader: 'dunlin', rates })
    expect(next.map(({ grade, outcome }) => `${grade} ${outcome}`)).toEqual([
      'A confirmed',
      'B open',
      'C open',
      'N open',
    ])
  })

  it('finds error rates that make the verdict and just smaller ones that do not', () => {
    const { rule: strict, answers, lensShare } = basis('A', 'C')
    const { evidence } = decideByReliability(strict, answers, lensShare)
    const { falseConfirmed } = errorRatesToDecide(evidence, strict)
    const at = (factor: number) =>
      decideByReliability({ ...strict, falseConfirmed: falseConfirmed * factor }, answers, lensShare).outcome
    expect([at(1.0001), at(0.9999)]).toEqual(['confirmed', 'open'])
    expect(errorRatesToDecide(evidence, strict).missedLens).toBeGreaterThan(1)
  })
})
