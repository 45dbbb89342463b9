/**
 * Probability that a candidate is a lens, from its grades, what each grader's grades are worth, and the share of lenses.
 *   log odds = ln(prior / (1 - prior)) + sum over the grades of w,   w = ln( P(grade | lens) / P(grade | not a lens) )
 * Dawid & Skene (1979), equation 2.5, for two classes with known rates; sums of logs, so that no number of grades
 * underflows. A grade adds one term, so that an update is O(1), and the order does not matter.
 */
import { CANNOT_JUDGE } from '@/lib/science/agreement/grade-table'
import type { GraderRates } from '@/lib/science/agreement/lens-model'

/** ln(p / (1 - p)). @param probability in [0, 1]: -Infinity at 0, Infinity at 1; NaN outside. */
export function logOddsOf(probability: number): number {
  return Math.log(probability) - Math.log1p(-probability)
}

/** Inverse of logOddsOf, without overflow at either end. NaN for NaN. */
export function probabilityOf(logOdds: number): number {
  if (logOdds >= 0) return 1 / (1 + Math.exp(-logOdds))
  const odds = Math.exp(logOdds)
  return odds / (1 + odds)
}

/**
 * Weight of one grade: natural log of its likelihood ratio, lens over not a lens. Above 0 it speaks for a lens.
 * @param grade code 0 to 3 (A, B, C, N), or CANNOT_JUDGE, which weighs nothing.
 * @returns Infinity or -Infinity where one class never gets the grade, 0 where neither does.
 */
export function gradeWeight(rates: GraderRates, grade: number): number {
  if (grade === CANNOT_JUDGE) return 0
  const lens = rates.lens[grade]
  const notLens = rates.notLens[grade]
  return lens === notLens ? 0 : Math.log(lens) - Math.log(notLens)
}

/** Weight of each grade of a grader, A to N. */
export function gradeWeights(rates: GraderRates): number[] {
  return Array.from({ length: rates.lens.length }, (_, grade) => gradeWeight(rates, grade))
}

/**
 * Log odds after one more grade. Certainty stays certainty under any finite weight.
 * @throws RangeError when two certain grades contradict each other, which no probability can express; rates smoothed by
 *   pseudo-counts never come to that.
 */
export function addGrade(logOdds: number, weight: number): number {
  const sum = logOdds + weight
  if (Number.isNaN(sum) && !Number.isNaN(logOdds) && !Number.isNaN(weight)) {
    throw new RangeError('Two grades exclude each other with certainty. Smooth the rates with pseudo-counts.')
  }
  return sum
}

/** Log odds from a prior and any number of weights; the prior's alone for none. */
export function posteriorLogOdds(prior: number, weights: Iterable<number>): number {
  let logOdds = logOddsOf(prior)
  for (const weight of weights) logOdds = addGrade(logOdds, weight)
  return logOdds
}
