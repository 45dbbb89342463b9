/**
 * Bootstrap intervals of agreement statistics over candidates: candidates are drawn again with replacement, as many as
 * there are, and the statistic is taken of each draw; the interval runs between the percentiles.
 * Source: B. Efron & R. J. Tibshirani (1993), An Introduction to the Bootstrap, chapter 13 (percentile interval).
 *
 * Candidates with like counts are one pattern: a resample is a multinomial draw over patterns, so that its cost depends on
 * the number of patterns (at most 209 for six grades of four kinds) and not on the number of candidates.
 */
import type { Interval } from '@/lib/science/agreement/binomial-intervals'
import { drawMultinomial } from '@/lib/science/agreement/multinomial'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'

export interface Patterns {
  /** each distinct row of counts, in the order of first appearance */
  counts: number[][]
  /** how many candidates have it */
  multiplicity: number[]
}

export interface BootstrapInterval extends Interval {
  resamples: number
  /** resamples in which the statistic was undefined; they are left out */
  undefinedResamples: number
}

export interface BootstrapOptions {
  /** equal seeds give equal intervals */
  seed: number
  /** default 1000, which holds the ends of a 95 % interval to a few per cent of its width */
  resamples?: number
  /** default 0.95 */
  level?: number
}

/** Groups candidates by like counts: rows are candidates, columns grades. */
export function patternsOf(counts: Iterable<ArrayLike<number>>): Patterns {
  const index = new Map<string, number>()
  const patterns: Patterns = { counts: [], multiplicity: [] }
  for (const row of counts) {
    const values = Array.from(row)
    const key = values.join(' ')
    const at = index.get(key)
    if (at !== undefined) {
      patterns.multiplicity[at] += 1
      continue
    }
    index.set(key, patterns.counts.length)
    patterns.counts.push(values)
    patterns.multiplicity.push(1)
  }
  return patterns
}

/**
 * @param multiplicity how many candidates have each pattern (or fell into each cell of a table of two graders).
 * @param statistic the statistic when each pattern occurs as often as it is told; null where undefined. It must not keep
 *   the array, which is used again.
 * @returns null for no candidates, or when more than half of the resamples are undefined.
 * @throws RangeError on a level outside (0, 1) or fewer than 2 resamples.
 */
export function bootstrapInterval(
  multiplicity: ArrayLike<number>,
  statistic: (multiplicity: Float64Array) => number | null,
  { seed, resamples = 1000, level = 0.95 }: BootstrapOptions,
): BootstrapInterval | null {
  if (!(level > 0 && level < 1)) throw new RangeError(`The level is ${level}; it must be between 0 and 1.`)
  if (!Number.isSafeInteger(resamples) || resamples < 2) throw new RangeError('There must be 2 resamples or more.')
  let candidates = 0
  for (let at = 0; at < multiplicity.length; at++) candidates += multiplicity[at]
  if (candidates === 0) return null
  const random = new SeededRandom(seed)
  const drawn = new Float64Array(multiplicity.length)
  const values: number[] = []
  for (let at = 0; at < resamples; at++) {
    const value = statistic(drawMultinomial(random, candidates, multiplicity, drawn))
    if (value !== null) values.push(value)
  }
  const undefinedResamples = resamples - values.length
  if (undefinedResamples > resamples / 2) return null
  values.sort((a, b) => a - b)
  const tail = (1 - level) / 2
  return { low: quantile(values, tail), high: quantile(values, 1 - tail), resamples, undefinedResamples }
}

/** Between order statistics by linear interpolation, type 7 of R. @param sorted ascending, not empty. */
function quantile(sorted: readonly number[], p: number): number {
  const place = (sorted.length - 1) * p
  const below = Math.floor(place)
  const above = Math.min(below + 1, sorted.length - 1)
  return sorted[below] + (place - below) * (sorted[above] - sorted[below])
}
