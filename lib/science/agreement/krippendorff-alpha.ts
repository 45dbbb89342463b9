/**
 * Krippendorff's alpha: reliability of grades given by any number of people, with missing ones.
 *
 *   alpha = 1 - Do / De
 *   Do = 1/n * sum over units u, values c, k of n_uc n_uk d(c,k) / (m_u - 1)
 *   De = 1/(n (n-1)) * sum over values c, k of n_c n_k d(c,k)
 * with n_uc the ratings c of unit u, m_u all ratings of u, n the ratings of all units that have two or more.
 * Source: K. Krippendorff (2011), Computing Krippendorff's Alpha-Reliability, sections A to D.
 *
 * Differences d: nominal 0 or 1; interval (c - k)^2; ordinal (sum of n_g from c to k - (n_c + n_k)/2)^2, which is the
 * interval difference of the middle ranks of c and k. Both sums of squares over pairs equal 2 m times the sum of squares
 * about the mean, so that the cost is linear in the number of ratings and no matrix of coincidences is held.
 */

export type AlphaMetric = 'nominal' | 'ordinal' | 'interval'

export interface AlphaResult {
  /** at most 1; 0 is chance; null where undefined */
  alpha: number | null
  /** units with two or more ratings */
  pairableUnits: number
  /** ratings in those units */
  pairableValues: number
  /** why alpha is null, in words; null where it is a number */
  reason: string | null
}

/** Entries of unit u are those from start[u] to start[u + 1]: a category and how many ratings it got. */
interface Tallies {
  start: Int32Array
  category: Int32Array
  count: Float64Array
  /** value of each category, ascending */
  values: readonly number[]
  /** how often each unit occurs */
  times?: ArrayLike<number>
}

/**
 * Alpha from ratings.
 * @param units rows are units, columns raters, null where a rater did not rate; rows may differ in length. Units with one
 *   rating or none are left out.
 * @throws RangeError on a rating that is not a finite number.
 */
export function krippendorffAlpha(units: readonly (readonly (number | null)[])[], metric: AlphaMetric): AlphaResult {
  const distinct = new Set<number>()
  let ratings = 0
  for (const [unit, row] of units.entries()) {
    for (const value of row) {
      if (value === null) continue
      if (!Number.isFinite(value))
        throw new RangeError(`Unit ${unit + 1} holds ${value}, which is not a finite number.`)
      distinct.add(value)
      ratings += 1
    }
  }
  const values = [...distinct].sort((a, b) => a - b)
  const categoryOf = new Map(values.map((value, category) => [value, category]))
  const start = new Int32Array(units.length + 1)
  const category = new Int32Array(ratings)
  let entry = 0
  for (const [unit, row] of units.entries()) {
    for (const value of row) if (value !== null) category[entry++] = categoryOf.get(value) as number
    start[unit + 1] = entry
  }
  return alphaOfTallies({ start, category, count: new Float64Array(ratings).fill(1), values }, metric)
}

/**
 * Alpha from counts, for data too large to hold as ratings.
 * @param counts one row a unit, one column a category: how many raters gave it.
 * @param values the value of each category, ascending.
 * @param multiplicity how often each row occurs, 0 or more; once when left out. For data grouped by like rows.
 * @throws RangeError on values that do not ascend, rows of another length, or counts that are not whole and 0 or more.
 */
export function krippendorffAlphaFromCounts(
  counts: readonly ArrayLike<number>[],
  values: readonly number[],
  metric: AlphaMetric,
  multiplicity?: ArrayLike<number>,
): AlphaResult {
  if (!values.every((value, i) => Number.isFinite(value) && (i === 0 || value > values[i - 1]))) {
    throw new RangeError('The values of the categories must be finite and ascend.')
  }
  const width = values.length
  const start = new Int32Array(counts.length + 1)
  const category = new Int32Array(counts.length * width)
  const count = new Float64Array(counts.length * width)
  let entry = 0
  for (const [unit, row] of counts.entries()) {
    if (row.length !== width) throw new RangeError(`Unit ${unit + 1} has ${row.length} counts for ${width} categories.`)
    for (let c = 0; c < width; c++) {
      if (!(row[c] >= 0) || !Number.isInteger(row[c])) {
        throw new RangeError(`Unit ${unit + 1} holds the count ${row[c]}; counts are whole numbers from 0 up.`)
      }
      if (row[c] === 0) continue
      category[entry] = c
      count[entry++] = row[c]
    }
    start[unit + 1] = entry
  }
  return alphaOfTallies({ start, category, count, values, times: multiplicity }, metric)
}

function alphaOfTallies(tallies: Tallies, metric: AlphaMetric): AlphaResult {
  const { start, category, count, values, times } = tallies
  const unitCount = start.length - 1
  const ratingsOf = new Float64Array(unitCount)
  const total = new Float64Array(values.length)
  let pairableUnits = 0
  let pairableValues = 0
  for (let unit = 0; unit < unitCount; unit++) {
    for (let e = start[unit]; e < start[unit + 1]; e++) ratingsOf[unit] += count[e]
    if (ratingsOf[unit] < 2) continue
    const often = times ? times[unit] : 1
    pairableUnits += often
    pairableValues += often * ratingsOf[unit]
    for (let e = start[unit]; e < start[unit + 1]; e++) total[category[e]] += often * count[e]
  }
  const undefinedBecause = (reason: string) => ({ alpha: null, pairableUnits, pairableValues, reason })
  if (pairableUnits === 0) return undefinedBecause('No unit has two ratings, so there is nothing to compare.')
  if (total.filter((n) => n > 0).length < 2) {
    return undefinedBecause('All ratings are the same, so that chance agreement is complete and alpha is undefined.')
  }

  const scatter = metric === 'nominal' ? mixedPairs(values.length) : squaresAboutMean(scoresOf(metric, values, total))
  let observed = 0
  for (let unit = 0; unit < unitCount; unit++) {
    const m = ratingsOf[unit]
    if (m < 2) continue
    observed += ((times ? times[unit] : 1) * scatter(category, count, start[unit], start[unit + 1], m)) / (m - 1)
  }
  const all = Int32Array.from(values.keys())
  const expected = scatter(all, total, 0, values.length, pairableValues) / (pairableValues - 1)
  return { alpha: 1 - observed / expected, pairableUnits, pairableValues, reason: null }
}

/** Sum over ordered pairs of d, halved alike for observed and expected, from entries `from` to `to` with m ratings. */
type Scatter = (category: Int32Array, count: Float64Array, from: number, to: number, m: number) => number

/** Nominal: pairs of unlike values, m^2 - sum of squared counts. */
function mixedPairs(categories: number): Scatter {
  const merged = new Float64Array(categories)
  return (category, count, from, to, m) => {
    for (let e = from; e < to; e++) merged[category[e]] += count[e]
    let like = 0
    for (let e = from; e < to; e++) {
      like += merged[category[e]] ** 2
      merged[category[e]] = 0
    }
    return m * m - like
  }
}

/** Interval and ordinal: sum over ordered pairs of squared differences = 2 m * squares about the mean. */
function squaresAboutMean(score: Float64Array): Scatter {
  return (category, count, from, to, m) => {
    let sum = 0
    for (let e = from; e < to; e++) sum += count[e] * score[category[e]]
    const mean = sum / m
    let squares = 0
    for (let e = from; e < to; e++) squares += count[e] * (score[category[e]] - mean) ** 2
    return 2 * m * squares
  }
}

/** Interval: the values. Ordinal: their middle ranks among all pairable ratings. */
function scoresOf(metric: 'ordinal' | 'interval', values: readonly number[], total: Float64Array): Float64Array {
  if (metric === 'interval') return Float64Array.from(values)
  let below = 0
  return total.map((n) => {
    below += n
    return below - n / 2
  })
}
