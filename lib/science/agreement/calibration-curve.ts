/**
 * Whether probabilities mean what they say: among candidates given about p, is the share of lenses p? And how far off
 * they are altogether: Brier score (G. W. Brier 1950, Monthly Weather Review 78, 1), log loss, expected calibration error.
 */
import { wilsonInterval, type Interval } from '@/lib/science/agreement/binomial-intervals'

export interface CalibrationBin {
  low: number
  high: number
  count: number
  lenses: number
  /** null in an empty bin, as the two below */
  meanProbability: number | null
  lensShare: number | null
  /** Wilson interval of the share */
  interval: Interval | null
}

export interface CalibrationCurve {
  bins: CalibrationBin[]
  /** mean over candidates of |mean probability - share| of their bin; null without candidates, as the two below */
  expectedCalibrationError: number | null
  /** mean of (p - truth)^2 */
  brierScore: number | null
  /** mean of -ln of the probability given to the truth; Infinity where one was given 0 */
  logLoss: number | null
}

export interface CalibrationOptions {
  /** bins of equal width; default 10 */
  bins?: number
  /** 'left': bin [low, high), the last closed; 'right': (low, high], the first closed. Default 'left'. */
  closed?: 'left' | 'right'
  /** level of the intervals; default 0.95 */
  level?: number
}

/**
 * @param probabilities in [0, 1]. @param isLens truth of each, one length with them.
 * @throws RangeError on a probability outside [0, 1], arrays of unlike length, or fewer than one bin.
 */
export function calibrationCurve(
  probabilities: ArrayLike<number>,
  isLens: ArrayLike<boolean | number>,
  { bins = 10, closed = 'left', level = 0.95 }: CalibrationOptions = {},
): CalibrationCurve {
  const n = probabilities.length
  if (isLens.length !== n) throw new RangeError(`There are ${n} probabilities and ${isLens.length} truths.`)
  if (!Number.isSafeInteger(bins) || bins < 1) throw new RangeError('There must be one bin or more.')
  const count = new Float64Array(bins)
  const lenses = new Float64Array(bins)
  const sum = new Float64Array(bins)
  let squares = 0
  let logs = 0
  for (let at = 0; at < n; at++) {
    const p = probabilities[at]
    if (!(p >= 0 && p <= 1)) throw new RangeError(`Probability ${at} is ${p}; it must be between 0 and 1.`)
    const truth = isLens[at] ? 1 : 0
    const bin = binOf(p, bins, closed)
    count[bin] += 1
    lenses[bin] += truth
    sum[bin] += p
    squares += (p - truth) ** 2
    logs -= truth ? Math.log(p) : Math.log1p(-p)
  }
  let apart = 0
  for (let bin = 0; bin < bins; bin++) apart += Math.abs(sum[bin] - lenses[bin])
  const mean = (total: number) => (n > 0 ? total / n : null)
  return {
    bins: Array.from({ length: bins }, (_, bin) => ({
      low: bin / bins,
      high: (bin + 1) / bins,
      count: count[bin],
      lenses: lenses[bin],
      meanProbability: count[bin] > 0 ? sum[bin] / count[bin] : null,
      lensShare: count[bin] > 0 ? lenses[bin] / count[bin] : null,
      interval: wilsonInterval(lenses[bin], count[bin], level),
    })),
    expectedCalibrationError: mean(apart),
    brierScore: mean(squares),
    logLoss: mean(logs),
  }
}

/** Compares with the edges bin / bins themselves, so that 0.6 is on the edge of five bins though 0.6 * 5 is below 3. */
function binOf(p: number, bins: number, closed: 'left' | 'right'): number {
  let bin = Math.min(bins - 1, Math.floor(p * bins))
  if (closed === 'left') {
    while (bin + 1 < bins && p >= (bin + 1) / bins) bin += 1
    while (bin > 0 && p < bin / bins) bin -= 1
  } else {
    while (bin + 1 < bins && p > (bin + 1) / bins) bin += 1
    while (bin > 0 && p <= bin / bins) bin -= 1
  }
  return bin
}
