/**
 * Cohen's kappa: agreement of two raters beyond chance, unweighted or with weights for how far apart they are.
 *   kappa = 1 - sum of w_ij p_ij / sum of w_ij p_i. p_.j
 * with disagreement weights w: unweighted 0 or 1, linear |i - j|, quadratic (i - j)^2, or a matrix; their scale cancels.
 * Sources: J. Cohen (1960), Educ. Psychol. Meas. 20, 37; J. Cohen (1968), Psychol. Bull. 70, 213.
 */

export type KappaWeights = 'unweighted' | 'linear' | 'quadratic' | readonly (readonly number[])[]

export interface CohenResult {
  /** at most 1; 0 is chance; null where undefined */
  kappa: number | null
  /** share of units on which the two agree exactly; null without units */
  observed: number | null
  /** that share by chance, from the two raters' own frequencies; null without units */
  expected: number | null
  units: number
  /** why kappa is null, in words; null where it is a number */
  reason: string | null
}

/**
 * @param table square, rows the first rater's category, columns the second's, in order; counts, which may be fractional.
 * @throws RangeError when the table or the weights are not square and of one size, or a count is negative or not finite.
 */
export function cohenKappa(table: readonly (readonly number[])[], weights: KappaWeights = 'unweighted'): CohenResult {
  const size = table.length
  if (table.some((row) => row.length !== size))
    throw new RangeError('The table must be square, one row and column a category.')
  if (table.some((row) => row.some((count) => !(count >= 0 && count < Infinity)))) {
    throw new RangeError('The counts of the table must be finite and 0 or more.')
  }
  const weightOf = disagreement(weights, size)
  const rows = table.map((row) => row.reduce((sum, count) => sum + count, 0))
  const columns = table.map((_, j) => table.reduce((sum, row) => sum + row[j], 0))
  const units = rows.reduce((sum, count) => sum + count, 0)
  if (units === 0)
    return { kappa: null, observed: null, expected: null, units, reason: 'The two raters share no unit.' }

  let agreeing = 0
  let agreeingByChance = 0
  let apart = 0
  let apartByChance = 0
  for (let i = 0; i < size; i++) {
    agreeing += table[i][i]
    agreeingByChance += rows[i] * columns[i]
    for (let j = 0; j < size; j++) {
      apart += weightOf(i, j) * table[i][j]
      apartByChance += weightOf(i, j) * rows[i] * columns[j]
    }
  }
  const shares = { observed: agreeing / units, expected: agreeingByChance / units ** 2, units }
  if (apartByChance === 0) {
    const reason = 'Both raters put every unit into one and the same category, so that kappa is undefined.'
    return { kappa: null, ...shares, reason }
  }
  return { kappa: 1 - (apart * units) / apartByChance, ...shares, reason: null }
}

/**
 * Counts how two raters placed the units that both rated.
 * @param pairs the two ratings of each unit as indexes of categories; units with a null are left out.
 * @throws RangeError on an index that is not a category.
 */
export function contingencyTable(
  pairs: Iterable<readonly [number | null, number | null]>,
  categories: number,
): number[][] {
  const table = Array.from({ length: categories }, () => new Array<number>(categories).fill(0))
  for (const [first, second] of pairs) {
    if (first === null || second === null) continue
    if (table[first]?.[second] === undefined) {
      throw new RangeError(`The ratings ${first} and ${second} are not both among the ${categories} categories from 0.`)
    }
    table[first][second] += 1
  }
  return table
}

function disagreement(weights: KappaWeights, size: number): (i: number, j: number) => number {
  if (weights === 'unweighted') return (i, j) => (i === j ? 0 : 1)
  if (weights === 'linear') return (i, j) => Math.abs(i - j)
  if (weights === 'quadratic') return (i, j) => (i - j) ** 2
  if (weights.length !== size || weights.some((row) => row.length !== size)) {
    throw new RangeError(`The weights must be a ${size} by ${size} matrix, like the table.`)
  }
  return (i, j) => weights[i][j]
}
