/**
 * How often one person says lens to lenses and not a lens to the rest, in a set of their grades, when what each candidate is
 * is known as a probability only. Pure.
 */
import { betaQuantile } from '@/lib/science/agreement/quantiles'
import type { ShareEstimate } from './report-types'

/** One grade of a person: when, whether A or B, and the probability of a lens by everything but this grade. */
export interface JudgedGrade {
  at: number
  saysLens: boolean
  probability: number
}

export interface TwoRates {
  /** share of lenses to which they say lens */
  seen: number
  /** share of the rest to which they say not a lens */
  passed: number
  /** how many lenses, and how many others, of known truth would tell as much */
  lenses: number
  others: number
}

const START = 0.75
const ITERATIONS = 60
const SETTLED = 1e-7

/**
 * Maximum likelihood of the two rates s and t under
 *   P(says lens) = p s + (1 - p) (1 - t),  p the probability of a lens by everybody else
 * by EM (Dawid & Skene 1979 for one grader, the others' say being fixed). Weighing each grade by p alone would pull both rates
 * towards the person's usual answer where p is vague. What the grades are worth follows from the expected information,
 *   I_ss = sum p^2 / v,  I_st = - sum p (1 - p) / v,  I_tt = sum (1 - p)^2 / v,  v = P(says lens) P(does not),
 * as n = s (1 - s) (I_ss - I_st^2 / I_tt): the number of lenses where the truth is known, 0 where p tells nothing.
 */
export function estimateTwoRates(judged: readonly JudgedGrade[]): TwoRates {
  let seen = START
  let passed = START
  let smooth = { seen, passed }
  for (let iteration = 0; iteration < ITERATIONS; iteration++) {
    const sums = { lenses: 0, seen: 0, others: 0, passed: 0 }
    for (const { saysLens, probability } of judged) {
      const lens = probability * (saysLens ? seen : 1 - seen)
      const other = (1 - probability) * (saysLens ? 1 - passed : passed)
      const isLens = lens + other > 0 ? lens / (lens + other) : probability
      sums.lenses += isLens
      sums.others += 1 - isLens
      if (saysLens) sums.seen += isLens
      else sums.passed += 1 - isLens
    }
    const next = {
      seen: sums.lenses > 0 ? sums.seen / sums.lenses : START,
      passed: sums.others > 0 ? sums.passed / sums.others : START,
    }
    smooth = { seen: (sums.seen + 0.5) / (sums.lenses + 1), passed: (sums.passed + 0.5) / (sums.others + 1) }
    const change = Math.max(Math.abs(next.seen - seen), Math.abs(next.passed - passed))
    seen = next.seen
    passed = next.passed
    if (change < SETTLED) break
  }
  return { seen, passed, ...effectiveNumbers(judged, smooth.seen, smooth.passed) }
}

/** @param seen, passed inside (0, 1) */
function effectiveNumbers(judged: readonly JudgedGrade[], seen: number, passed: number) {
  const information = { lenses: 0, both: 0, others: 0 }
  for (const { probability: p } of judged) {
    const says = p * seen + (1 - p) * (1 - passed)
    const variance = says * (1 - says)
    information.lenses += (p * p) / variance
    information.both += (p * (1 - p)) / variance
    information.others += ((1 - p) * (1 - p)) / variance
  }
  const left = (own: number, other: number) => Math.max(0, own - (other > 0 ? information.both ** 2 / other : 0))
  return {
    lenses: seen * (1 - seen) * left(information.lenses, information.others),
    others: passed * (1 - passed) * left(information.others, information.lenses),
  }
}

/**
 * A share with the equal-tailed 95 % interval of Jeffreys' prior for as many of known truth as it is worth: binomial-intervals.ts
 * has it for whole numbers. @param n above 0.
 */
export function shareOfEffective(share: number, n: number): ShareEstimate {
  const [yes, no] = [share * n + 0.5, Math.max(0, 1 - share) * n + 0.5]
  return { value: share, interval: { low: betaQuantile(0.025, yes, no), high: betaQuantile(0.975, yes, no) } }
}
