/**
 * Fleiss' kappa: agreement of many raters on named categories, beyond chance.
 *
 *   kappa = (Po - Pe) / (1 - Pe)
 *   Po = mean over subjects with r_i >= 2 of  sum over k of r_ik (r_ik - 1) / (r_i (r_i - 1))
 *   Pe = sum over k of pi_k^2,   pi_k = mean over subjects with r_i >= 1 of r_ik / r_i
 * with r_ik the raters who put subject i into category k and r_i all raters of i.
 *
 * Where every subject has the same number of ratings this is J. L. Fleiss (1971), Psychological Bulletin 76, 378. Where the
 * numbers differ it is the generalisation of K. L. Gwet (2014), Handbook of Inter-Rater Reliability, 4th ed., chapter 2
 * (the form computed by the R package irrCAC), which becomes Fleiss' when they do not; `form` says which it was. Whoever
 * wants Fleiss' own restriction takes `subjectsRatedBy(counts, n)` first.
 */

export interface FleissResult {
  /** at most 1; 0 is chance; null where undefined */
  kappa: number | null
  /** Po, null without a subject that has two ratings */
  observed: number | null
  /** Pe, null without a rating */
  expected: number | null
  /** subjects with two or more ratings */
  subjects: number
  /** 'unequal' when the numbers of ratings differ between subjects that have any */
  form: 'equal' | 'unequal'
  /** why kappa is null, in words; null where it is a number */
  reason: string | null
}

/**
 * @param counts one row a subject, one column a category: how many raters chose it. Rows of zeros are left out.
 * @param multiplicity how often each row occurs, 0 or more; once when left out. For data grouped by like rows.
 * @throws RangeError on rows of unlike length or counts that are not whole and 0 or more.
 */
export function fleissKappa(counts: readonly ArrayLike<number>[], multiplicity?: ArrayLike<number>): FleissResult {
  const categories = counts[0]?.length ?? 0
  const share = new Float64Array(categories)
  let rated = 0
  let subjects = 0
  let agreement = 0
  let firstTotal = 0
  let form: FleissResult['form'] = 'equal'
  for (const [subject, row] of counts.entries()) {
    const times = multiplicity ? multiplicity[subject] : 1
    const total = totalOf(row, subject, categories)
    if (total === 0 || times === 0) continue
    if (rated === 0) firstTotal = total
    rated += times
    if (total !== firstTotal) form = 'unequal'
    let agreeing = 0
    for (let k = 0; k < categories; k++) {
      share[k] += (times * row[k]) / total
      agreeing += row[k] * (row[k] - 1)
    }
    if (total < 2) continue
    subjects += times
    agreement += (times * agreeing) / (total * (total - 1))
  }

  const observed = subjects > 0 ? agreement / subjects : null
  const expected = rated > 0 ? share.reduce((sum, s) => sum + (s / rated) ** 2, 0) : null
  const result = (kappa: number | null, reason: string | null) => ({
    kappa,
    observed,
    expected,
    subjects,
    form,
    reason,
  })
  if (observed === null || expected === null)
    return result(null, 'No subject has two ratings, so there is nothing to compare.')
  if (share.filter((s) => s > 0).length < 2) {
    return result(null, 'All ratings are the same, so that chance agreement is complete and kappa is undefined.')
  }
  return result((observed - expected) / (1 - expected), null)
}

/** The subjects that have exactly `ratings` ratings: the restriction of Fleiss (1971). */
export function subjectsRatedBy<Row extends ArrayLike<number>>(counts: readonly Row[], ratings: number): Row[] {
  return counts.filter((row) => Array.from(row).reduce((sum, count) => sum + count, 0) === ratings)
}

function totalOf(row: ArrayLike<number>, subject: number, categories: number): number {
  if (row.length !== categories) {
    throw new RangeError(`Subject ${subject + 1} has ${row.length} counts where the first has ${categories}.`)
  }
  let total = 0
  for (let k = 0; k < categories; k++) {
    if (!(row[k] >= 0) || !Number.isInteger(row[k])) {
      throw new RangeError(`Subject ${subject + 1} holds the count ${row[k]}; counts are whole numbers from 0 up.`)
    }
    total += row[k]
  }
  return total
}
