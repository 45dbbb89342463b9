/** Display limits of an image: which pixel value becomes black and which white. Only finite pixels count. */
import { finiteValues, selectQuantile } from './selection'

export interface Interval {
  low: number
  high: number
}

const NO_INTERVAL: Interval = { low: Number.NaN, high: Number.NaN }

/** Smallest and largest finite value; NaN for both when there is none. */
export function minMaxInterval(values: ArrayLike<number>): Interval {
  let low = Number.POSITIVE_INFINITY
  let high = Number.NEGATIVE_INFINITY
  for (let i = 0; i < values.length; i++) {
    const value = values[i]
    if (value - value !== 0) continue
    if (value < low) low = value
    if (value > high) high = value
  }
  return low > high ? { ...NO_INTERVAL } : { low, high }
}

/**
 * The limits that leave out equal shares at both ends: percentiles (100 - p)/2 and 100 - (100 - p)/2, interpolated
 * linearly between ranks. NaN for both when no value is finite.
 * @param percentile share of the pixels inside the limits, 0 to 100.
 */
export function percentileInterval(values: ArrayLike<number>, percentile: number): Interval {
  const below = (100 - percentile) / 2
  return asymmetricPercentileInterval(values, below, 100 - below)
}

/** The limits at two percentiles, 0 to 100 each, interpolated linearly between ranks. */
export function asymmetricPercentileInterval(values: ArrayLike<number>, lower: number, upper: number): Interval {
  const work = finiteValues(values)
  return { low: selectQuantile(work, lower / 100), high: selectQuantile(work, upper / 100) }
}

export interface ZscaleOptions {
  /** Most samples taken from the image. */
  samples?: number
  /** Divides the slope of the fitted line: smaller is harder. 0 leaves it as it is. */
  contrast?: number
  /** Give up (min and max of the samples) when more than this share is rejected. */
  maxReject?: number
  /** Least number of samples that must survive. */
  minPixels?: number
  /** Rejection limit in standard deviations about the line. */
  rejectionSigma?: number
  maxIterations?: number
}

/**
 * The zscale limits of IRAF (F. Valdes), which show structure near the median whatever the tails do: a straight line is
 * fitted to the sorted samples, outliers rejected, and its slope sets the limits about the median.
 * Follows astropy 5.2 `ZScaleInterval`, whose ranks differ from IRAF's by one sample at each end.
 * @returns NaN for both limits when no value is finite.
 */
export function zscale(values: ArrayLike<number>, options: ZscaleOptions = {}): Interval {
  const { samples: most = 1000, contrast = 0.25, maxReject = 0.5, minPixels = 5 } = options
  const { rejectionSigma = 2.5, maxIterations = 5 } = options
  const sorted = takeSamples(finiteValues(values), most).sort()
  const count = sorted.length
  if (count === 0) return { ...NO_INTERVAL }
  const least = sorted[0]
  const largest = sorted[count - 1]
  const minimumGood = Math.max(minPixels, Math.floor(count * maxReject))
  const grow = Math.max(1, Math.floor(count * 0.01))

  let bad = new Uint8Array(count)
  let good = count
  let previousGood = count + 1
  let slope = 0
  for (let round = 0; round < maxIterations; round++) {
    if (good >= previousGood || good < minimumGood) break
    const line = fitLine(sorted, bad)
    slope = line.slope
    bad = dilate(rejectOutliers(sorted, bad, line, rejectionSigma), grow)
    previousGood = good
    good = 0
    for (let i = 0; i < count; i++) good += 1 - bad[i]
  }
  if (good < minimumGood) return { low: least, high: largest }
  if (contrast > 0) slope /= contrast
  const centre = Math.floor((count - 1) / 2)
  const median = count % 2 === 1 ? sorted[centre] : (sorted[centre] + sorted[centre + 1]) / 2
  return {
    low: Math.max(least, median - (centre - 1) * slope),
    high: Math.min(largest, median + (count - centre) * slope),
  }
}

function takeSamples(values: Float64Array, most: number): Float64Array {
  const stride = Math.floor(Math.max(1, values.length / most))
  const taken = new Float64Array(Math.min(most, Math.ceil(values.length / stride)))
  for (let i = 0; i < taken.length; i++) taken[i] = values[i * stride]
  return taken
}

interface Line {
  slope: number
  intercept: number
}

/** Least squares of value against rank over the samples not marked bad, about the means for accuracy. */
function fitLine(values: Float64Array, bad: Uint8Array): Line {
  let count = 0
  let rankSum = 0
  let valueSum = 0
  for (let i = 0; i < values.length; i++) {
    if (bad[i]) continue
    count++
    rankSum += i
    valueSum += values[i]
  }
  const meanRank = rankSum / count
  const meanValue = valueSum / count
  let cross = 0
  let square = 0
  for (let i = 0; i < values.length; i++) {
    if (bad[i]) continue
    cross += (i - meanRank) * (values[i] - meanValue)
    square += (i - meanRank) ** 2
  }
  const slope = square > 0 ? cross / square : 0
  return { slope, intercept: meanValue - slope * meanRank }
}

function rejectOutliers(values: Float64Array, bad: Uint8Array, line: Line, sigmas: number): Uint8Array {
  let count = 0
  let sum = 0
  let squares = 0
  const residual = values.map((value, i) => value - (line.intercept + line.slope * i))
  for (let i = 0; i < values.length; i++) {
    if (bad[i]) continue
    count++
    sum += residual[i]
  }
  const mean = sum / count
  for (let i = 0; i < values.length; i++) if (!bad[i]) squares += (residual[i] - mean) ** 2
  const threshold = sigmas * Math.sqrt(squares / count)
  return bad.map((was, i) => (was || Math.abs(residual[i]) > threshold ? 1 : 0))
}

/** A sample becomes bad when any of the `width` samples round it is; an even width reaches one further to the left. */
function dilate(bad: Uint8Array, width: number): Uint8Array<ArrayBuffer> {
  const grown = new Uint8Array(bad.length)
  const right = Math.floor((width - 1) / 2)
  for (let i = 0; i < bad.length; i++) {
    for (let j = Math.max(0, i + right - (width - 1)); j <= Math.min(bad.length - 1, i + right); j++) {
      if (bad[j]) grown[i] = 1
    }
  }
  return grown
}
