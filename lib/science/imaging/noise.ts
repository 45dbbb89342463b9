/**
 * Sky level and sky noise of a cutout with a galaxy in the middle.
 *
 * Light only ever adds, so the faint side of the pixel histogram is the sky's own: the level comes from the clipped
 * histogram by the mode estimate 2.5 median - 1.5 mean (E. Bertin & S. Arnouts, A&AS 117, 393 (1996), section 3), the
 * noise from the pixels below it. The central disc is left out where enough pixels remain. One pass over the pixels:
 * all else works on the histogram.
 */
import { medianAbsoluteDeviationSigma } from './mad'
import { Scratch } from './scratch'
import { selectMedian } from './selection'

export interface Noise {
  /** Sky level in pixel units; 0 when no pixel is finite. */
  background: number
  /** Standard deviation of the sky in pixel units; 0 only when all finite pixels are equal or there is none. */
  sigma: number
  /** Share of the pixels that are finite, 0 to 1. */
  finiteFraction: number
}

const BINS = 1024
const REACH_SIGMA = 8
const SAMPLES = 512
/** Standard deviation of a normal distribution of unit width cut at 3 sigma. */
const CUT_SPREAD = 0.98658
/** Radius of the disc left out, as a share of the shorter side. */
const CENTRE_SHARE = 0.3

/** Scratch of one call, kept to spare an allocation; emptied at each use. */
const histogram = new Uint32Array(BINS)
const collected = new Scratch()

/**
 * @param plane width x height pixels, row by row; pixels that are not finite do not count.
 * Never throws. Measured on 80 x 80 simulated pixels: noise within 5 %; level within 0.05 sigma, and 0.2 sigma high
 * where a galaxy's wings reach the edge.
 */
export function estimateNoise(plane: Float32Array, width: number, height: number): Noise {
  const values = collected.take(plane.length)
  const finite = collect(plane, values)
  const finiteFraction = plane.length > 0 ? finite / plane.length : 0
  if (finite === 0) return { background: 0, sigma: 0, finiteFraction }
  const outer = collectOuter(plane, width, height, values)
  const count = outer > 0 ? outer : collect(plane, values)
  const guess = firstGuess(values, count)
  if (guess.sigma === 0) return { background: guess.background, sigma: spread(plane, guess.background), finiteFraction }
  return { ...refine(values, count, guess.background, guess.sigma), finiteFraction }
}

function collect(plane: Float32Array, into: Float32Array): number {
  let count = 0
  for (let i = 0; i < plane.length; i++) {
    const value = plane[i]
    if (value - value === 0) into[count++] = value
  }
  return count
}

/** The finite pixels outside the central disc; 0 when they are too few to stand for the sky. */
function collectOuter(plane: Float32Array, width: number, height: number, into: Float32Array): number {
  const radius = CENTRE_SHARE * Math.min(width, height)
  const centreX = (width - 1) / 2
  const centreY = (height - 1) / 2
  let count = 0
  for (let y = 0; y < height; y++) {
    const half = Math.sqrt(Math.max(0, radius * radius - (y - centreY) ** 2))
    const left = half > 0 ? Math.ceil(centreX - half) : width
    const right = half > 0 ? Math.floor(centreX + half) : width - 1
    const row = y * width
    for (let x = 0; x < left; x++) {
      const value = plane[row + x]
      if (value - value === 0) into[count++] = value
    }
    for (let x = right + 1; x < width; x++) {
      const value = plane[row + x]
      if (value - value === 0) into[count++] = value
    }
  }
  return count >= 200 ? count : 0
}

/** Median and MAD of a sample. When more than half share one value (blank fill), the others decide. */
function firstGuess(values: Float32Array, count: number): { background: number; sigma: number } {
  const sample = sampleOf(values, count, Number.NaN)
  const background = selectMedian(sample)
  const sigma = medianAbsoluteDeviationSigma(sample)
  if (sigma > 0) return { background, sigma }
  const others = sampleOf(values, count, background)
  if (others.length < 32) return { background, sigma: 0 }
  return { background: selectMedian(others), sigma: medianAbsoluteDeviationSigma(others) }
}

/** Up to SAMPLES values spread over the pixels by the golden ratio, which does not lock to rows or columns. */
function sampleOf(values: Float32Array, count: number, excluded: number): Float32Array {
  const sample = new Float32Array(Math.min(count, SAMPLES))
  let taken = 0
  for (let i = 0; i < sample.length; i++) {
    const index = count <= SAMPLES ? i : Math.floor(((i * 0.6180339887498949) % 1) * count)
    const value = values[index]
    if (value !== excluded) sample[taken++] = value
  }
  return sample.subarray(0, taken)
}

function refine(values: Float32Array, count: number, guess: number, guessSigma: number) {
  const low = guess - REACH_SIGMA * guessSigma
  const width = (2 * REACH_SIGMA * guessSigma) / BINS
  const scale = 1 / width
  histogram.fill(0)
  for (let i = 0; i < count; i++) {
    const bin = (values[i] - low) * scale
    if (bin >= 0 && bin < BINS) histogram[bin | 0]++
  }
  // In bins from here on; bin b stands for its middle, b + 0.5.
  let background = BINS / 2
  let sigma = guessSigma * scale
  for (let round = 0; round < 12; round++) {
    const from = Math.max(0, Math.round(background - 3 * sigma))
    const to = Math.min(BINS, Math.round(background + 3 * sigma))
    const { mean, median } = histogramCentre(from, to)
    const mode = Math.abs(mean - median) < 0.3 * sigma ? 2.5 * median - 1.5 * mean : median
    const lower = lowerSpread(from, mode) / CUT_SPREAD
    const settled = Math.abs(lower - sigma) < 0.002 * sigma && Math.abs(mode - background) < 0.002 * sigma
    if (lower > 0) sigma = lower
    background = mode
    if (settled) break
  }
  // Sheppard's correction takes out the width of the bins.
  const bare = Math.sqrt(Math.max(sigma * sigma - 1 / 12, sigma * sigma * 0.25))
  return { background: low + background * width, sigma: bare * width }
}

function histogramCentre(from: number, to: number): { mean: number; median: number } {
  let total = 0
  let sum = 0
  for (let bin = from; bin < to; bin++) {
    const n = histogram[bin]
    total += n
    sum += n * (bin + 0.5)
  }
  let below = 0
  for (let bin = from; bin < to; bin++) {
    const n = histogram[bin]
    if (n > 0 && below + n >= total / 2) {
      return { mean: sum / total, median: bin + (total / 2 - below) / n }
    }
    below += n
  }
  return { mean: (from + to) / 2, median: (from + to) / 2 }
}

/** Root mean square distance below `centre`, of the bins from `from` on. */
function lowerSpread(from: number, centre: number): number {
  let total = 0
  let squares = 0
  for (let bin = from; bin + 0.5 < centre; bin++) {
    const n = histogram[bin]
    total += n
    squares += n * (bin + 0.5 - centre) ** 2
  }
  return total > 0 ? Math.sqrt(squares / total) : 0
}

/** Plain root mean square distance from `centre` of all finite pixels; 0 only when all are equal. */
function spread(plane: Float32Array, centre: number): number {
  let count = 0
  let squares = 0
  for (let i = 0; i < plane.length; i++) {
    const value = plane[i]
    if (value - value !== 0) continue
    count++
    squares += (value - centre) ** 2
  }
  return Math.sqrt(squares / count)
}
