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
import { waldBoundaries } from '@/lib/science/agreement/sequential-test'

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

  it('tells grades of people of one name apart', () => {
    const weak = { lens: [0.31, 0.3, 0.21, 0.18], notLens: [0.28, 0.29, 0.22, 0.21] }
    const { rule: strict, lensShare, answers } = basis('A', 'A', 'B')
    const twins = [{ ...answers[0], rates: weak }, ...answers].map((answer) => ({ ...answer, grader: 'avocet' }))
    // The first A weighs ln(0.31 / 0.28) only: leaving out the two that weigh ln 30 is what overturns it.
    expect(fewestToOverturn({ rule: strict, lensShare, answers: twins })).toEqual([1, 2])
  })

  it('finds error rates that make the verdict and just smaller ones that do not', () => {
    const { rule: strict, answers, lensShare } = basis('A', 'C')
    const { evidence } = decideByReliability(strict, answers, lensShare)
    // ln(30 / 2): alpha = 0.9 / 15.
    const { falseConfirmed } = errorRatesToDecide(evidence, strict)
    expect(falseConfirmed).toBe(0.06)
    const at = (rate: number) => decideByReliability({ ...strict, falseConfirmed: rate }, answers, lensShare).outcome
    expect([at(0.06), at(0.0599)]).toEqual(['confirmed', 'open'])
  })

  it('rounds error rates up, so that a rule with the rate told does decide', () => {
    const strict = { ...rule, missedLens: 0.05 }
    for (let evidence = -9; evidence <= 9; evidence += 0.37) {
      const { falseConfirmed, missedLens } = errorRatesToDecide(evidence, strict)
      if (falseConfirmed !== null) {
        expect(evidence).toBeGreaterThanOrEqual(waldBoundaries({ ...strict, falseConfirmed }).upper - 1e-9)
      }
      if (missedLens !== null) {
        expect(evidence).toBeLessThanOrEqual(waldBoundaries({ ...strict, missedLens }).lower + 1e-9)
      }
      expect(falseConfirmed !== null || missedLens !== null).toBe(true)
    }
  })

  it('tells no higher rate than that of a rule which decides', () => {
    const own = { ...rule, falseConfirmed: 0.0125 }
    expect(errorRatesToDecide(waldBoundaries(own).upper, own).falseConfirmed).toBe(0.0125)
  })

  it('finds none where it and the other rate would sum to 1', () => {
    // Without a grade: alpha = 1 - beta, beta = 1 - alpha.
    expect(errorRatesToDecide(0, rule)).toEqual({ falseConfirmed: null, missedLens: null })
    expect(errorRatesToDecide(Math.log(15), rule).missedLens).toBeNull()
    expect(errorRatesToDecide(-Math.log(15), rule).falseConfirmed).toBeNull()
  })
})
