import type { LimitsSigma } from './recipe'
import { Scratch } from './scratch'
import { selectRank } from './selection'

const bright = new Scratch()

/** The value that becomes white: the recipe's percentile of the finite pixels, held between its least and its most. */
export function whiteLevel(values: Float32Array, limits: LimitsSigma): number {
  const kept = bright.take(values.length)
  let count = 0
  for (let i = 0; i < values.length; i++) {
    const value = values[i]
    // Only what lies above the least white can raise it; the ranks below need no order.
    if (value > limits.leastWhiteSigma) kept[count++] = value
  }
  const above = Math.floor(values.length * (1 - limits.whitePercentile / 100))
  if (count <= above) return limits.leastWhiteSigma
  return Math.min(limits.mostWhiteSigma, selectRank(kept, count - 1 - above, count))
}
