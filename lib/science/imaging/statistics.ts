import { finiteValues, selectMedian } from './selection'

export { medianAbsoluteDeviationSigma } from './mad'
export { estimateNoise, type Noise } from './noise'

export interface ClippedStatistics {
  mean: number
  median: number
  /** Population standard deviation (divisor n) of what was kept. */
  std: number
  /** How many values were kept. */
  kept: number
  iterations: number
}

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
      const value = kept[i]
      if (value >= median - reach && value <= median + reach) kept[count++] = value
    }
    if (count === before) break
  }
  const { mean, std } = moments(kept, count)
  return { mean, median: selectMedian(kept, count), std, kept: count, iterations }
}

function moments(values: Float64Array, count: number): { mean: number; std: number } {
  if (count === 0) return { mean: Number.NaN, std: Number.NaN }
  let sum = 0
  for (let i = 0; i < count; i++) sum += values[i]
  const mean = sum / count
  let squares = 0
  for (let i = 0; i < count; i++) squares += (values[i] - mean) ** 2
  return { mean, std: Math.sqrt(squares / count) }
}
