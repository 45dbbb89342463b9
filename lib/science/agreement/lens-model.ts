/**
 * The two-class model of the product: is it a lens or not, under the four grades A, B, C, N. Names its classes, starts,
 * pseudo-counts, and reads a fit.
 */
import type { DawidSkeneFit } from '@/lib/science/agreement/dawid-skene'
import type { DawidSkeneOptions } from '@/lib/science/agreement/dawid-skene-options'

export const LENS = 0
export const NOT_A_LENS = 1

/** What one grade says at the start: its points over 3, read as the probability of a lens. Grade by grade. */
export const LENS_START: readonly number[] = [1, 0, 2 / 3, 1 / 3, 1 / 3, 2 / 3, 0, 1]

/**
 * Pseudo-counts of a grader of whom nothing is known, 10 grades for each class: lenses get A, B, C, N as 4, 3, 2, 1, and
 * what is not a lens as 0.5, 1, 2.5, 6. They say which class is which and are outweighed by some dozens of grades.
 * Our choice, no source.
 */
export const LENS_PSEUDO_COUNTS: readonly number[] = [4, 3, 2, 1, 0.5, 1, 2.5, 6]

/** Options of the product's fit; truth and a start from an earlier fit are added by the caller. */
export const LENS_MODEL: Readonly<DawidSkeneOptions> = {
  classes: 2,
  pseudoCounts: LENS_PSEUDO_COUNTS,
  shares: 'estimated',
  startOfGrade: LENS_START,
}

/** What is known of the share of lenses before any grade counts as this many candidates. Our choice, no source. */
const PRIOR = { share: 0.02, candidates: 1 }

/**
 * The share of lenses with one candidate of the prior in it, so that no grades make it certain that a search holds none, or only
 * lenses. @param fitted share among the graded candidates, in [0, 1]; any number where there are none.
 * @returns inside (0, 1).
 */
export function lensShareWithPrior(fitted: number, gradedCandidates: number): number {
  const lenses = gradedCandidates > 0 ? gradedCandidates * fitted : 0
  return (lenses + PRIOR.candidates * PRIOR.share) / (gradedCandidates + PRIOR.candidates)
}

/** How often a grader gives each grade, A to N, to lenses and to what is not a lens; each sums to 1. */
export interface GraderRates {
  lens: ArrayLike<number>
  notLens: ArrayLike<number>
}

/** Rates of each grader of a two-class fit. @throws RangeError when the fit has other than two classes. */
export function ratesOfGraders(
  fit: Pick<DawidSkeneFit, 'classes' | 'grades' | 'graders' | 'confusion'>,
): GraderRates[] {
  if (fit.classes !== 2) throw new RangeError(`The fit has ${fit.classes} classes; rates are read from one of two.`)
  const row = (grader: number, c: number) => {
    const from = (grader * 2 + c) * fit.grades
    return fit.confusion.slice(from, from + fit.grades)
  }
  return Array.from({ length: fit.graders }, (_, grader) => ({
    lens: row(grader, LENS),
    notLens: row(grader, NOT_A_LENS),
  }))
}

/**
 * Pseudo-counts drawn from all graders together, for a fit in which a grader with few grades leans on the others: the
 * confusion of the pooled grades, `strength` grades for each class. Empirical Bayes with a fixed strength.
 * @param strength 0 or more. @returns classes * grades numbers, class by class; a class without any grade is uniform.
 */
export function pooledPseudoCounts(
  fit: Pick<DawidSkeneFit, 'classes' | 'grades' | 'graders' | 'counts'>,
  strength: number,
): Float64Array {
  const { classes, grades } = fit
  const pooled = new Float64Array(classes * grades)
  for (let at = 0; at < fit.counts.length; at++) pooled[at % pooled.length] += fit.counts[at]
  for (let c = 0; c < classes; c++) {
    const row = pooled.subarray(c * grades, (c + 1) * grades)
    const total = row.reduce((sum, count) => sum + count, 0)
    for (let grade = 0; grade < grades; grade++) row[grade] = strength * (total > 0 ? row[grade] / total : 1 / grades)
  }
  return pooled
}
