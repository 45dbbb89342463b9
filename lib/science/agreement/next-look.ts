/**
 * Where the next look informs most: the expected information of a grader's look at a candidate, and whether the look may
 * settle it.
 *   I = H(p) - sum over grades of P(grade) H(p after it),   H(p) = -p log2 p - (1 - p) log2(1 - p), in bits
 * the mutual information of class and grade (D. V. Lindley 1956, Ann. Math. Statist. 27, 986).
 */
import type { GraderRates } from '@/lib/science/agreement/lens-model'
import { gradeWeight } from '@/lib/science/agreement/posterior'
import type { Boundaries } from '@/lib/science/agreement/sequential-test'

/** Entropy of yes or no, in bits. @param p in [0, 1]; NaN outside. */
export function binaryEntropyBits(p: number): number {
  if (p === 0 || p === 1) return 0
  return -(p * Math.log2(p) + (1 - p) * Math.log2(1 - p))
}

/** Expected information of one look, in bits: 0 to binaryEntropyBits(p). @param probability of a lens, in [0, 1]. */
export function expectedInformationBits(probability: number, { lens, notLens }: GraderRates): number {
  let after = 0
  for (let grade = 0; grade < lens.length; grade++) {
    const withLens = probability * lens[grade]
    const given = withLens + (1 - probability) * notLens[grade]
    if (given > 0) after += given * binaryEntropyBits(withLens / given)
  }
  return Math.max(0, binaryEntropyBits(probability) - after)
}

/**
 * Probability that the grader's next grade takes the evidence to a boundary.
 * @param evidence sum of weights so far. @param probability of a lens after them.
 */
export function chanceToSettle(
  evidence: number,
  probability: number,
  rates: GraderRates,
  { upper, lower }: Boundaries,
): number {
  let chance = 0
  for (let grade = 0; grade < rates.lens.length; grade++) {
    const after = evidence + gradeWeight(rates, grade)
    if (after < upper && after > lower) continue
    chance += probability * rates.lens[grade] + (1 - probability) * rates.notLens[grade]
  }
  return chance
}

/**
 * Which of the graders to ask next about a candidate: indexes from the most informative, the first of equals first.
 * @param probability of a lens now.
 */
export function rankGraders(probability: number, graders: readonly GraderRates[]): { grader: number; bits: number }[] {
  return graders
    .map((rates, grader) => ({ grader, bits: expectedInformationBits(probability, rates) }))
    .sort((a, b) => b.bits - a.bits || a.grader - b.grader)
}

/**
 * Which candidates a grader who sits down should see: indexes of the `count` candidates on which this grader's look
 * informs most, best first, the first of equals first.
 * @param probabilities of a lens, one a candidate. Cost O(candidates log candidates).
 */
export function rankCandidates(probabilities: ArrayLike<number>, rates: GraderRates, count: number): number[] {
  const bits = Float64Array.from({ length: probabilities.length }, (_, at) =>
    expectedInformationBits(probabilities[at], rates),
  )
  return Array.from(bits.keys())
    .sort((a, b) => bits[b] - bits[a] || a - b)
    .slice(0, count)
}
