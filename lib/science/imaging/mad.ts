import { finiteValues, selectMedian } from './selection'

/** 1 / (Phi^-1(3/4)): turns a median absolute deviation into the standard deviation of a normal distribution. */
const MAD_TO_SIGMA = 1.482602218505602

/**
 * Robust standard deviation, 1.4826 median(|v - median(v)|), of the finite values; NaN when there is none.
 * Source: F. R. Hampel, JASA 69, 383 (1974); factor as in astropy.stats.mad_std.
 */
export function medianAbsoluteDeviationSigma(values: ArrayLike<number>): number {
  const work = finiteValues(values)
  const median = selectMedian(work)
  for (let i = 0; i < work.length; i++) work[i] = Math.abs(work[i] - median)
  return MAD_TO_SIGMA * selectMedian(work)
}
