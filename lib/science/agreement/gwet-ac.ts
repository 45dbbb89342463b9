/**
 * Gwet's agreement coefficients AC1 (identity weights) and AC2 (weights for how far apart grades are), which do not
 * collapse, as kappa does, where nearly everything is in one category, as with rare lenses.
 *   AC = (pa - pe) / (1 - pe)
 *   pa = mean over units with r_i >= 2 of  sum over k of r_ik (r*_ik - 1) / (r_i (r_i - 1)),   r*_ik = sum over l of w_kl r_il
 *   pe = T_w / (q (q - 1)) * sum over k of pi_k (1 - pi_k),   pi_k = mean over units with r_i >= 1 of r_ik / r_i
 * with r_ik the raters who put unit i into category k, q categories, T_w the sum of all weights.
 * Weights: identity; linear 1 - |k - l| / (q - 1); quadratic 1 - (k - l)^2 / (q - 1)^2.
 * Sources: K. L. Gwet (2008), Br. J. Math. Stat. Psychol. 61, 29; Gwet (2014), Handbook of Inter-Rater Reliability, 4th
 * ed., chapter 4 (the form with missing ratings, as computed by the R package irrCAC).
 */

export type GwetWeights = 'identity' | 'linear' | 'quadratic'

export interface GwetResult {
  /** at most 1; 0 is chance; null where undefined */
  ac: number | null
  /** pa, null without a unit that has two ratings */
  observed: number | null
  /** pe, null without a rating */
  expected: number | null
  /** units with two or more ratings */
  units: number
  /** why ac is null, in words; null where it is a number */
  reason: string | null
}

/**
 * @param counts one row a unit, one column a category in order: how many raters chose it. Rows of zeros are left out.
 * @param multiplicity how often each row occurs, 0 or more; once when left out. For data grouped by like rows.
 * @throws RangeError on fewer than two categories, rows of unlike length, or counts not finite and 0 or more.
 */
export function gwetAc(
  counts: readonly ArrayLike<number>[],
  weights: GwetWeights = 'identity',
  multiplicity?: ArrayLike<number>,
): GwetResult {
  const categories = counts[0]?.length ?? 2
  if (categories < 2) throw new RangeError('Gwet’s coefficients need two categories or more.')
  const weightOf = weighting(weights, categories)
  const share = new Float64Array(categories)
  let rated = 0
  let units = 0
  let agreement = 0
  for (const [unit, row] of counts.entries()) {
    const times = multiplicity ? multiplicity[unit] : 1
    const total = totalOf(row, unit, categories)
    if (total === 0 || times === 0) continue
    rated += times
    for (let k = 0; k < categories; k++) share[k] += (times * row[k]) / total
    if (total < 2) continue
    units += times
    agreement += (times * agreeingPairs(row, weightOf, categories)) / (total * (total - 1))
  }
  const observed = units > 0 ? agreement / units : null
  const expected = rated > 0 ? chance(share, rated, weightOf) : null
  if (observed === null || expected === null) {
    return { ac: null, observed, expected, units, reason: 'No unit has two ratings, so there is nothing to compare.' }
  }
  return { ac: (observed - expected) / (1 - expected), observed, expected, units, reason: null }
}

type WeightOf = (k: number, l: number) => number

function weighting(weights: GwetWeights, categories: number): WeightOf {
  if (weights === 'identity') return (k, l) => (k === l ? 1 : 0)
  if (weights === 'linear') return (k, l) => 1 - Math.abs(k - l) / (categories - 1)
  return (k, l) => 1 - ((k - l) / (categories - 1)) ** 2
}

function agreeingPairs(row: ArrayLike<number>, weightOf: WeightOf, categories: number): number {
  let sum = 0
  for (let k = 0; k < categories; k++) {
    if (row[k] === 0) continue
    let weighted = 0
    for (let l = 0; l < categories; l++) weighted += weightOf(k, l) * row[l]
    sum += row[k] * (weighted - 1)
  }
  return sum
}

function chance(share: Float64Array, rated: number, weightOf: WeightOf): number {
  const categories = share.length
  let weights = 0
  let spread = 0
  for (let k = 0; k < categories; k++) {
    for (let l = 0; l < categories; l++) weights += weightOf(k, l)
    spread += (share[k] / rated) * (1 - share[k] / rated)
  }
  return (weights * spread) / (categories * (categories - 1))
}

function totalOf(row: ArrayLike<number>, unit: number, categories: number): number {
  if (row.length !== categories) {
    throw new RangeError(`Unit ${unit + 1} has ${row.length} counts where the first has ${categories}.`)
  }
  let total = 0
  for (let k = 0; k < categories; k++) {
    if (!(row[k] >= 0 && row[k] < Infinity)) {
      throw new RangeError(`Unit ${unit + 1} holds the count ${row[k]}; counts are finite and 0 or more.`)
    }
    total += row[k]
  }
  return total
}
