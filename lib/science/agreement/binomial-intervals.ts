/**
 * Confidence intervals for a proportion x / n, as for a grader's share of right answers.
 *
 * Wilson is the one to show: its coverage is near the level on average. Clopper-Pearson never falls below the level and is
 * wide. Jeffreys is the Bayesian interval with equal tails. Sources: R. G. Newcombe (1998), Statistics in Medicine 17, 857,
 * methods 3 to 5; L. D. Brown, T. T. Cai & A. DasGupta (2001), Statistical Science 16, 101 (Jeffreys, section 3.1.3).
 *
 * All: x whole, 0 <= x <= n; level inside (0, 1), 0.95 when nothing is said; null for n = 0, which has no interval.
 * @throws RangeError outside that domain.
 */
import { betaQuantile, normalQuantile } from '@/lib/science/agreement/quantiles'

export interface Interval {
  low: number
  high: number
}

/** Wilson score interval, without continuity correction. */
export function wilsonInterval(x: number, n: number, level = 0.95): Interval | null {
  checkDomain(x, n, level)
  if (n === 0) return null
  const z = normalQuantile((1 + level) / 2)
  const centre = x + (z * z) / 2
  const halfWidth = z * Math.sqrt((x * (n - x)) / n + (z * z) / 4)
  const scale = n + z * z
  return {
    low: x === 0 ? 0 : (centre - halfWidth) / scale,
    high: x === n ? 1 : (centre + halfWidth) / scale,
  }
}

/** Wilson score interval with continuity correction (Newcombe's method 4). */
export function wilsonContinuityInterval(x: number, n: number, level = 0.95): Interval | null {
  checkDomain(x, n, level)
  if (n === 0) return null
  const z = normalQuantile((1 + level) / 2)
  const p = x / n
  const scale = 2 * (n + z * z)
  const root = (sign: 1 | -1) => z * Math.sqrt(z * z - sign * 2 - 1 / n + 4 * p * (n * (1 - p) + sign))
  return {
    low: x === 0 ? 0 : Math.max(0, (2 * x + z * z - 1 - root(1)) / scale),
    high: x === n ? 1 : Math.min(1, (2 * x + z * z + 1 + root(-1)) / scale),
  }
}

/** Clopper-Pearson 'exact' interval. */
export function clopperPearsonInterval(x: number, n: number, level = 0.95): Interval | null {
  checkDomain(x, n, level)
  if (n === 0) return null
  const tail = (1 - level) / 2
  return {
    low: x === 0 ? 0 : betaQuantile(tail, x, n - x + 1),
    high: x === n ? 1 : betaQuantile(1 - tail, x + 1, n - x),
  }
}

/** Jeffreys interval with equal tails and the edge rule of Brown, Cai & DasGupta: 0 at x = 0 and 1 at x = n. */
export function jeffreysInterval(x: number, n: number, level = 0.95): Interval | null {
  checkDomain(x, n, level)
  if (n === 0) return null
  const tail = (1 - level) / 2
  return {
    low: x === 0 ? 0 : betaQuantile(tail, x + 0.5, n - x + 0.5),
    high: x === n ? 1 : betaQuantile(1 - tail, x + 0.5, n - x + 0.5),
  }
}

function checkDomain(x: number, n: number, level: number): void {
  if (!Number.isSafeInteger(n) || n < 0)
    throw new RangeError(`The number of trials is ${n}; it must be a whole number from 0.`)
  if (!Number.isSafeInteger(x) || x < 0 || x > n) {
    throw new RangeError(`The number of successes is ${x}; it must be a whole number from 0 to ${n}.`)
  }
  if (!(level > 0 && level < 1)) throw new RangeError(`The level is ${level}; it must be between 0 and 1.`)
}
