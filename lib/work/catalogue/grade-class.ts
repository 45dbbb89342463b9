/**
 * The class of an entry: the letter under which a list of lenses is usually published.
 *
 * Where a lead's ruling names a grade, that is the class. Else it follows the mean of the grade points: A from 2.5, B from
 * 1.5, C below. These are the halves between the points of the letters (A 3, B 2, C 1), so the class is the letter nearest to
 * the mean, ties to the surer one. Common practice, no source.
 */
export type GradeClass = 'A' | 'B' | 'C'

export const LEAST_MEAN_OF_CLASS = { A: 2.5, B: 1.5 } as const

/** In words, for the page and for what is exported. */
export const GRADE_CLASS_RULE =
  `the grade that a lead ruled, else by the mean of the grade points: ` +
  `A from ${LEAST_MEAN_OF_CLASS.A}, B from ${LEAST_MEAN_OF_CLASS.B}, C below`

/** What the letters say, for pages and files. */
export const GRADE_MEANINGS = 'A sure, B probable, C possible, N not a lens.'

/**
 * @param mean grade points, 0 to 3; null when nobody gave a grade.
 * @returns null when there is neither a ruled grade nor a mean.
 */
export function gradeClass(ruledGrade: GradeClass | null, mean: number | null): GradeClass | null {
  if (ruledGrade !== null) return ruledGrade
  if (mean === null) return null
  if (mean >= LEAST_MEAN_OF_CLASS.A) return 'A'
  return mean >= LEAST_MEAN_OF_CLASS.B ? 'B' : 'C'
}
