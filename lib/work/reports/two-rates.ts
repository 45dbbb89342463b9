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
  const groups = groupByProbability(judged)
  let seen = START
  let passed = START
  let smooth = { seen, passed }
  for (let iteration = 0; iteration < ITERATIONS; iteration++) {
    const sums = { lenses: 0, seen: 0, others: 0, passed: 0 }
    for (const { probability, saying, not } of groups) {
      const isLensIfSaying = lensShare(probability * seen, (1 - probability) * (1 - passed))
      const isLensIfNot = lensShare(probability * (1 - seen), (1 - probability) * passed)
      const lensesSeen = saying * isLensIfSaying
      const lensesMissed = not * isLensIfNot
      sums.lenses += lensesSeen + lensesMissed
      sums.others += saying + not - lensesSeen - lensesMissed
      sums.seen += lensesSeen
      sums.passed += not - lensesMissed
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
  return { seen, passed, ...effectiveNumbers(groups, smooth.seen, smooth.passed) }
}

const lensShare = (lens: number, other: number) => (lens + other > 0 ? lens / (lens + other) : 0)

/** Grades whose candidates are about equally likely lenses, at their mean probability. */
interface Group {
  probability: number
  saying: number
  not: number
}

/** In log odds; candidates of known truth stand apart. */
const GROUP_WIDTH = 0.05
const FARTHEST = 15

/** So that the cost does not grow with the grades of a window. */
function groupByProbability(judged: readonly JudgedGrade[]): Group[] {
  const groups = new Map<number, Group>()
  for (const { probability, saysLens } of judged) {
    const logOdds = Math.log(probability) - Math.log1p(-probability)
    const isKnown = probability === 0 || probability === 1
    const near = Math.round(Math.min(FARTHEST, Math.max(-FARTHEST, logOdds)) / GROUP_WIDTH)
    const key = isKnown ? probability + 2 * Math.ceil(FARTHEST / GROUP_WIDTH) : near
    const group = groups.get(key) ?? { probability: 0, saying: 0, not: 0 }
    group.probability += probability
    if (saysLens) group.saying += 1
    else group.not += 1
    groups.set(key, group)
  }
  for (const group of groups.values()) group.probability /= group.saying + group.not
  return [...groups.values()]
}

/** @param seen, passed inside (0, 1) */
function effectiveNumbers(groups: readonly Group[], seen: number, passed: number) {
  const information = { lenses: 0, both: 0, others: 0 }
  for (const { probability: p, saying, not } of groups) {
    const says = p * seen + (1 - p) * (1 - passed)
    const weight = (saying + not) / (says * (1 - says))
    information.lenses += weight * p * p
    information.both += weight * p * (1 - p)
    information.others += weight * (1 - p) * (1 - p)
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
