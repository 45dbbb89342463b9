/**
 * The four grades, their points, and the mean and spread of a set of points.
 *
 * The points 3, 2, 1, 0 for three ordered classes of lens and 'not a lens' are common to many published searches (common
 * practice, no single source). Grades are ordinal: show their distribution beside the mean.
 */

/** A sure lens, B probable, C possible, N not a lens. */
export type Grade = 'A' | 'B' | 'C' | 'N'

/** What a grader can answer: a grade, or U for 'cannot judge'. */
export type Answer = Grade | 'U'

/** From the surest to 'not a lens'. */
export const GRADES: readonly Grade[] = ['A', 'B', 'C', 'N']

/** Points of each grade. U has none: a non-answer is not a zero. */
export const GRADE_POINTS: Readonly<Record<Grade, number>> = { A: 3, B: 2, C: 1, N: 0 }

export function isGrade(answer: Answer): answer is Grade {
  return answer !== 'U'
}

/** The grades among the answers, surest first, without the U; the same for any order of the answers. */
export function gradesAmong(answers: Iterable<Answer>): Grade[] {
  return [...answers].filter(isGrade).sort((a, b) => GRADE_POINTS[b] - GRADE_POINTS[a])
}

export interface MeanAndSpread {
  n: number
  /** null when n = 0 */
  mean: number | null
  /** population standard deviation, divisor n; null when n = 0, 0 when n = 1 */
  spread: number | null
}

/**
 * Mean and spread of grade points.
 *   mean = S / n,   spread = sqrt(n Q - S^2) / n,   S = sum of x, Q = sum of x^2
 * The spread is the POPULATION standard deviation (divisor n): it describes the grades that were given and estimates
 * nothing beyond them, so that two opposite grades A and N have the spread 1.5, the largest there is.
 * Sums of integers are exact, so the result does not depend on the order and equals a threshold exactly where it should.
 * For non-integers much larger than their spread this form loses digits; it is meant for points.
 * @returns mean and spread null for no points, spread 0 for one point; NaN if a point is NaN. Never throws.
 */
export function meanAndSpread(points: readonly number[]): MeanAndSpread {
  const n = points.length
  if (n === 0) return { n, mean: null, spread: null }
  let sum = 0
  let sumOfSquares = 0
  for (const point of points) {
    sum += point
    sumOfSquares += point * point
  }
  return { n, mean: sum / n, spread: Math.sqrt(Math.max(0, n * sumOfSquares - sum * sum)) / n }
}
