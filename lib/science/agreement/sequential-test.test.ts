import { describe, expect, it } from 'vitest'
import {
  errorRateProblems,
  errorRatesFor,
  probabilityInterval,
  sequentialOutcome,
  waldBoundaries,
} from '@/lib/science/agreement/sequential-test'

describe('waldBoundaries', () => {
  // A. Wald (1945), Ann. Math. Statist. 16, 117, section 3.2: A = (1 - beta) / alpha, B = beta / (1 - alpha).
  it('are the logs of Wald’s A and B', () => {
    const { upper, lower } = waldBoundaries({ falseConfirmed: 0.01, missedLens: 0.05 })
    expect(upper).toBeCloseTo(Math.log(95), 12)
    expect(lower).toBeCloseTo(Math.log(5 / 99), 12)
  })

  it('keep their digits for tiny error rates', () => {
    const { upper, lower } = waldBoundaries({ falseConfirmed: 1e-20, missedLens: 1e-20 })
    expect(upper).toBeCloseTo(20 * Math.LN10, 10)
    expect(lower).toBeCloseTo(-20 * Math.LN10, 10)
  })

  it.each([
    [{ falseConfirmed: 0, missedLens: 0.1 }, 'may be confirmed is 0'],
    [{ falseConfirmed: 0.1, missedLens: 1 }, 'may be set aside is 1'],
    [{ falseConfirmed: 0.5, missedLens: 0.5 }, 'sum to less than 1'],
    [{ falseConfirmed: NaN, missedLens: 0.5 }, 'may be confirmed is NaN'],
  ])('refuse %j', (rates, message) => {
    expect(errorRateProblems(rates).join(' ')).toContain(message)
    expect(() => waldBoundaries(rates)).toThrow(message)
  })
})

describe('errorRatesFor', () => {
  it('gives a boundary at which the probability of a lens is the purity asked for', () => {
    for (const lensShare of [0.02, 0.2]) {
      const rates = errorRatesFor({ completeness: 0.95, purity: 0.9 }, lensShare)
      expect(rates.missedLens).toBeCloseTo(0.05, 12)
      expect(probabilityInterval(waldBoundaries(rates), lensShare).confirm).toBeCloseTo(0.9, 12)
    }
  })

  it('returns the purity by Bayes’ rule', () => {
    const { falseConfirmed, missedLens } = errorRatesFor({ completeness: 0.8, purity: 0.97 }, 0.1)
    const right = 0.1 * (1 - missedLens)
    expect(right / (right + 0.9 * falseConfirmed)).toBeCloseTo(0.97, 12)
  })

  it('refuses goals that no grade is needed for, and goals outside 0 and 1', () => {
    expect(() => errorRatesFor({ completeness: 0.9, purity: 0.1 }, 0.5)).toThrow('Ask for more')
    expect(() => errorRatesFor({ completeness: 1, purity: 0.9 }, 0.5)).toThrow('between 0 and 1')
  })
})

describe('sequentialOutcome', () => {
  const boundaries = { upper: 3, lower: -2 }
  const limits = { leastLooks: 2, mostLooks: 4 }

  it('decides on and beyond the boundaries, and asks for another look between them', () => {
    expect(sequentialOutcome(3, 2, boundaries, limits)).toBe('confirm')
    expect(sequentialOutcome(-2, 2, boundaries, limits)).toBe('set aside')
    expect(sequentialOutcome(2.9, 3, boundaries, limits)).toBe('another look')
  })

  it('does not depend on the order in which the weights were summed', () => {
    const sums = [0.1 + 0.2 + 0.3, 0.3 + 0.2 + 0.1]
    expect(sums[0]).not.toBe(sums[1])
    for (const upper of sums) {
      const outcomes = sums.map((evidence) => sequentialOutcome(evidence, 3, { upper, lower: -1 }, limits))
      expect(outcomes).toEqual(['confirm', 'confirm'])
    }
  })

  it('decides nothing before the least looks and asks for none after the most', () => {
    expect(sequentialOutcome(9, 1, boundaries, limits)).toBe('another look')
    expect(sequentialOutcome(2.9, 4, boundaries, limits)).toBe('undecided')
    expect(sequentialOutcome(-9, 4, boundaries, limits)).toBe('set aside')
  })
})
