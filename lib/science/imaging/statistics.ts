import { finiteValues, selectMedian } from './selection'

export interface ClippedStatistics {
  mean: number
  median: number
  /** Population standard deviation (divisor n) of what was kept. */
  std: number
  /** How many values were kept. */
  kept: number
  iterations: number
}

/** 1 / (Phi^-1(3/4)): turns a median absolute deviation into the standard deviation of a normal distribution. */
const MAD_TO_SIGMA = 1.482602218505602

/**
 * Sigma-clipped statistics round the median.
 *   repeat: c = median, s = population standard deviation of the kept values; keep c - sigma s <= v <= c + sigma s
 * until nothing is removed or `maxIterations` rounds are done. Non-finite values are left out first.
 * Convention: that of astropy.stats.sigma_clipped_stats (cenfunc median, stdfunc std with divisor n).
 * @returns NaN for mean, median and std when no value is finite. Never throws.
 */
export function clippedStatistics(
  values: ArrayLike<number>,
  { sigma = 3, maxIterations = 5 }: { sigma?: number; maxIterations?: number } = {},
): ClippedStatistics {
  const kept = finiteValues(values)
  let count = kept.length
  let iterations = 0
  while (iterations < maxIterations && count > 0) {
    iterations++
    const median = selectMedian(kept, count)
    const reach = sigma * moments(kept, count).std
    const before = count
    count = 0
    for (let i = 0; i < before; i++) {
      const value = kept[i]!
      if (value >= median - reach && value <= median + reach) kept[count++] = value
    }
    if (count === before) break
  }
  const { mean, std } = moments(kept, count)
  return { mean, median: selectMedian(kept, count), std, kept: count, iterations }
}

/**
 * Robust standard deviation, 1.4826 median(|v - median(v)|), of the finite values; NaN when there is none.
 * Source: F. R. Hampel, JASA 69, 383 (1974); factor as in astropy.stats.mad_std.
 */
export function medianAbsoluteDeviationSigma(values: ArrayLike<number>): number {
  const work = finiteValues(values)
  const median = selectMedian(work)
  for (let i = 0; i < work.length; i++) work[i] = Math.abs(work[i]! - median)
  return MAD_TO_SIGMA * selectMedian(work)
}

function moments(values: Float64Array, count: number): { mean: number; std: number } {
  if (count === 0) return { mean: Number.NaN, std: Number.NaN }
  let sum = 0
  for (let i = 0; i < count; i++) sum += values[i]!
  const mean = sum / count
  let squares = 0
  for (let i = 0; i < count; i++) squares += (values[i]! - mean) ** 2
  return { mean, std: Math.sqrt(squares / count) }
}
