import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { readFixture } from '@/lib/science/agreement/_fixtures'
import { CANNOT_JUDGE } from '@/lib/science/agreement/grade-table'
import {
  addGrade,
  gradeWeight,
  gradeWeights,
  logOddsOf,
  posteriorLogOdds,
  probabilityOf,
} from '@/lib/science/agreement/posterior'

const { examples } = readFixture('sequential-bayes.json')

/** Two grades only, yes 0 and no 1, as in the reference. */
const ratesOf = ({ tpr, fpr }: { tpr: number; fpr: number }) => ({ lens: [tpr, 1 - tpr], notLens: [fpr, 1 - fpr] })
const codeOf = { yes: 0, no: 1 }
const weightOf = (vote: (typeof examples)[number]['votes'][number]) =>
  gradeWeight(ratesOf(vote), vote.vote === null ? CANNOT_JUDGE : codeOf[vote.vote])

describe('the posterior of a lens', () => {
  // Dawid & Skene (1979), eq. 2.5 for two classes with known rates; exact fractions, log odds by mpmath at 50 digits.
  it.each(examples)('equals the exact fractions after every vote: $name', (example) => {
    let logOdds = logOddsOf(example.prior)
    example.votes.forEach((vote, at) => {
      logOdds = addGrade(logOdds, weightOf(vote))
      expect(Math.abs(probabilityOf(logOdds) - example.steps[at])).toBeLessThan(1e-12)
    })
    expect(Math.abs(probabilityOf(logOdds) - example.posterior)).toBeLessThan(1e-12)
    if (example.log_odds !== null) expect(logOdds).toBeCloseTo(example.log_odds, 12)
  })

  it('is the same for votes in any order', () => {
    for (const { prior, votes } of examples) {
      const forth = posteriorLogOdds(prior, votes.map(weightOf))
      const back = posteriorLogOdds(prior, [...votes].reverse().map(weightOf))
      expect(probabilityOf(back)).toBeCloseTo(probabilityOf(forth), 12)
    }
  })

  it('does not underflow with a thousand contrary votes', () => {
    const weights = Array.from({ length: 1000 }, () => gradeWeight(ratesOf({ tpr: 0.01, fpr: 0.99 }), 0))
    const logOdds = posteriorLogOdds(0.5, weights)
    expect(logOdds).toBeCloseTo(-1000 * Math.log(99), 6)
    expect(probabilityOf(logOdds)).toBe(0)
    expect(posteriorLogOdds(0.5, [logOdds, -logOdds])).toBe(0)
  })

  it('refuses two certain grades that contradict each other', () => {
    const never = gradeWeight(ratesOf({ tpr: 1, fpr: 0.05 }), 1)
    const always = gradeWeight(ratesOf({ tpr: 0.9, fpr: 0 }), 0)
    expect([never, always]).toEqual([-Infinity, Infinity])
    expect(() => posteriorLogOdds(0.5, [never, always])).toThrow('exclude each other')
  })
})

describe('a grade', () => {
  it('weighs nothing from a grader who tells nothing, and nothing when it is cannot judge', () => {
    const blind = { lens: [0.1, 0.2, 0.3, 0.4], notLens: [0.1, 0.2, 0.3, 0.4] }
    expect(gradeWeights(blind)).toEqual([0, 0, 0, 0])
    expect(gradeWeight({ lens: [1, 0], notLens: [0, 1] }, CANNOT_JUDGE)).toBe(0)
    expect(gradeWeight({ lens: [1, 0], notLens: [1, 0] }, 1)).toBe(0)
  })

  it('weighs the log of its likelihood ratio', () => {
    const weights = gradeWeights({ lens: [0.6, 0.2, 0.1, 0.1], notLens: [0.05, 0.1, 0.25, 0.6] })
    ;[Math.log(12), Math.log(2), Math.log(0.4), -Math.log(6)].forEach((weight, grade) =>
      expect(weights[grade]).toBeCloseTo(weight, 12),
    )
  })
})

describe('log odds', () => {
  it('are undone by probabilityOf', () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-12, max: 1 - 1e-9, noNaN: true }), (p) => {
        expect(probabilityOf(logOddsOf(p)) / p).toBeCloseTo(1, 9)
      }),
    )
    expect([logOddsOf(0), logOddsOf(0.5), logOddsOf(1)]).toEqual([-Infinity, 0, Infinity])
    expect([probabilityOf(-Infinity), probabilityOf(Infinity)]).toEqual([0, 1])
    expect(probabilityOf(NaN)).toBeNaN()
  })
})
