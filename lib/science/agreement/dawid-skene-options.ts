/** What a Dawid-Skene fit is told, and the check of it. */
import type { GradesByCandidate } from '@/lib/science/agreement/grade-table'

/** Known class of a candidate is not known. */
export const UNKNOWN_TRUTH = -1

export interface DawidSkeneOptions {
  /** number of latent classes, 1 or more */
  classes: number
  /**
   * Added to each cell of each grader's confusion before its rows are normed: one number, or classes * grades numbers,
   * class by class. 0 gives the maximum-likelihood estimate of the paper.
   */
  pseudoCounts: number | ArrayLike<number>
  /** 'estimated', or the class shares to hold, classes numbers that sum to 1 */
  shares: 'estimated' | ArrayLike<number>
  /** known class of each candidate or UNKNOWN_TRUTH; every one unknown when left out */
  truth?: ArrayLike<number>
  /**
   * What one grade says of the class at the start: grades * classes numbers, grade by grade, each grade's summing to 1.
   * The identity when left out, which needs as many classes as grades. A candidate starts from the mean of its grades'.
   */
  startOfGrade?: ArrayLike<number>
  /** start from the shares and confusion of an earlier fit instead */
  from?: { classShares: ArrayLike<number>; confusion: ArrayLike<number> }
  /** stop when no posterior moved by this much; default 1e-6 */
  tolerance?: number
  /** default 1000 */
  maxIterations?: number
  /** told after every iteration */
  onIteration?: (state: { iteration: number; change: number; logLikelihood: number; logPosterior: number }) => void
}

/** @throws RangeError with what is outside its domain. */
export function checkDawidSkeneOptions(table: GradesByCandidate, options: DawidSkeneOptions): void {
  const { classes, pseudoCounts, shares, truth, startOfGrade, from } = options
  const { grades, graders, candidates } = table
  if (!Number.isSafeInteger(classes) || classes < 1) throw new RangeError('There must be one class or more.')
  const pseudo = typeof pseudoCounts === 'number' ? [pseudoCounts] : Array.from(pseudoCounts)
  if (typeof pseudoCounts !== 'number' && pseudo.length !== classes * grades) {
    throw new RangeError(`There are ${pseudo.length} pseudo-counts for ${classes} classes and ${grades} grades.`)
  }
  if (!pseudo.every((count) => count >= 0 && count < Infinity)) {
    throw new RangeError('Pseudo-counts must be finite and 0 or more.')
  }
  if (shares !== 'estimated' && !isDistribution(shares, classes)) {
    throw new RangeError(`The class shares must be ${classes} numbers of 0 or more that sum to 1.`)
  }
  if (!startOfGrade && !from && classes !== grades) {
    throw new RangeError(
      `${classes} classes under ${grades} grades need startOfGrade: what each grade says of the class.`,
    )
  }
  if (startOfGrade) {
    const rows = Array.from({ length: grades }, (_, grade) =>
      Array.from({ length: classes }, (_, c) => startOfGrade[grade * classes + c]),
    )
    if (startOfGrade.length !== grades * classes || !rows.every((row) => isDistribution(row, classes))) {
      throw new RangeError(
        `startOfGrade must hold ${classes} numbers of 0 or more that sum to 1 for each of ${grades} grades.`,
      )
    }
  }
  if (from && (from.classShares.length !== classes || from.confusion.length !== graders * classes * grades)) {
    throw new RangeError('The fit to start from has other classes, graders or grades.')
  }
  if (truth && truth.length !== candidates) {
    throw new RangeError(`There are ${truth.length} truths for ${candidates} candidates.`)
  }
  for (let candidate = 0; truth && candidate < candidates; candidate++) {
    const known = truth[candidate]
    if (known !== UNKNOWN_TRUTH && !(Number.isInteger(known) && known >= 0 && known < classes)) {
      throw new RangeError(
        `Candidate ${candidate} has the known class ${known}; there are ${classes}, numbered from 0.`,
      )
    }
  }
}

function isDistribution(values: ArrayLike<number>, length: number): boolean {
  if (values.length !== length) return false
  let sum = 0
  for (let at = 0; at < length; at++) {
    if (!(values[at] >= 0)) return false
    sum += values[at]
  }
  return Math.abs(sum - 1) < 1e-9
}
