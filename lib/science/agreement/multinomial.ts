/** Seeded binomial and multinomial numbers, exact in distribution, whose cost does not grow with the number of trials. */
import { logGamma } from '@/lib/science/agreement/quantiles'
import type { SeededRandom } from '@/lib/science/lensing/seeded-random'

/**
 * Successes among n trials. Below an expectation of 10 by inversion of the distribution, above by transformed rejection,
 * algorithm BTRS of W. Hoermann, J. Statist. Comput. Simul. 46, 101 (1993).
 * @param trials whole, 0 or more. @param probability taken into [0, 1].
 */
export function drawBinomial(random: SeededRandom, trials: number, probability: number): number {
  if (!(trials > 0 && probability > 0)) return 0
  if (probability >= 1) return trials
  if (probability > 0.5) return trials - drawBinomial(random, trials, 1 - probability)
  return trials * probability < 10 ? byInversion(random, trials, probability) : byRejection(random, trials, probability)
}

/**
 * Counts of n draws among categories of the given weights, by a chain of binomials.
 * @param weights finite, 0 or more, not all zero unless n is 0. Written into `counts` when it is given.
 */
export function drawMultinomial(
  random: SeededRandom,
  draws: number,
  weights: ArrayLike<number>,
  counts = new Float64Array(weights.length),
): Float64Array {
  let left = draws
  let weightLeft = 0
  for (let at = 0; at < weights.length; at++) weightLeft += weights[at]
  let last = weights.length - 1
  while (last > 0 && weights[last] === 0) last -= 1
  for (let at = 0; at < weights.length; at++) {
    counts[at] = at === last ? left : drawBinomial(random, left, weights[at] / weightLeft)
    left -= counts[at]
    weightLeft -= weights[at]
  }
  return counts
}

function byInversion(random: SeededRandom, trials: number, probability: number): number {
  const odds = probability / (1 - probability)
  let mass = Math.exp(trials * Math.log1p(-probability))
  let remaining = random.uniform()
  for (let successes = 0; successes < trials; successes++) {
    if (remaining < mass) return successes
    remaining -= mass
    mass *= (odds * (trials - successes)) / (successes + 1)
  }
  return trials
}

function byRejection(random: SeededRandom, trials: number, probability: number): number {
  const odds = probability / (1 - probability)
  const deviation = Math.sqrt(trials * probability * (1 - probability))
  const b = 1.15 + 2.53 * deviation
  const a = -0.0873 + 0.0248 * b + 0.01 * probability
  const centre = trials * probability + 0.5
  const vR = 0.92 - 4.2 / b
  const alpha = (2.83 + 5.1 / b) * deviation
  const mode = Math.floor((trials + 1) * probability)
  const atMode = logGamma(mode + 1) + logGamma(trials - mode + 1)
  for (;;) {
    const u = random.uniform() - 0.5
    const v = random.uniform()
    const us = 0.5 - Math.abs(u)
    const successes = Math.floor(((2 * a) / us + b) * u + centre)
    if (successes < 0 || successes > trials) continue
    if (us >= 0.07 && v <= vR) return successes
    const logRatio =
      atMode - logGamma(successes + 1) - logGamma(trials - successes + 1) + (successes - mode) * Math.log(odds)
    if (Math.log((v * alpha) / (a / (us * us) + b)) <= logRatio) return successes
  }
}
