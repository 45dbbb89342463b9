/**
 * The shortest band minus the longest, scaled so that the galaxy in the middle vanishes. What is bluer than the galaxy stays
 * bright, whatever its shape: no model of the galaxy is needed, only its colour.
 *
 * Seeing differs between bands. To first order a blur of variance v pixels^2 (in each direction) turns an image R into
 * R + v / 2 times its Laplacian, so scale and blur come out of one linear fit in the core,
 *   blue = scale (red + v / 2 Laplacian(red)),
 * and whichever band is sharper is blurred by the kernel (w, 1 - 2 w, w) in both directions, w = v / 2, before subtracting.
 */
import { nonNegativeLeastSquares } from './lens-light/nnls'
import type { NormalisedPlane } from './normalise-planes'

export interface BlueMinusRed {
  /** Row 0 is the bottom row; in units of the noise of the blue band; NaN where either has no data. */
  values: Float32Array
  /** Noise of `values`, 1 or more. */
  sigma: number
  /** Blue per red of the galaxy's core, in noise units of both. */
  scale: number
  /** Variance added to the red (positive) or the blue (negative) image, pixels^2 in each direction. */
  blurPixels2: number
  /** The red image that was subtracted, scaled. */
  red: Float32Array
}

/** Core pixels fitted: within this many pixels of the centre. */
const FIT_RADIUS = 3.5
/** Share of its light by which the core may differ from the fit. */
const CORE_DOUBT = 0.01
/** Outer radius of the ring round the core, pixels. */
const AROUND = 8
/** How much of the foreign light around may reach into the core, evenly and growing outwards. */
const EVEN_SHARE = 0.3
const GROWING_SHARE = 0.5
/** Spread of the difference of seeing between bands, pixels^2. */
const USUAL_BLUR = 0.4
/** Blurs beyond this are not a difference of seeing that so small a kernel can make. */
const MOST_BLUR = 0.9

/** @param x, y centre of the galaxy, pixels. Both planes of one size. */
export function blueMinusRed(blue: NormalisedPlane, red: NormalisedPlane, x: number, y: number): BlueMinusRed | null {
  const fit = fitScaleAndBlur(blue, red, x, y)
  if (fit === null) return null
  const { width, height } = blue
  const { scale, blurPixels2 } = fit
  const share = Math.abs(blurPixels2) / 2
  const redImage = blurPixels2 > 0 ? blur(red.values, width, height, share) : red.values
  const blueImage = blurPixels2 < 0 ? blur(blue.values, width, height, share) : blue.values
  const values = new Float32Array(blueImage.length)
  const scaled = new Float32Array(blueImage.length)
  for (let i = 0; i < values.length; i++) {
    scaled[i] = scale * redImage[i]
    values[i] = blueImage[i] - scaled[i]
  }
  // Noise of the kernel in both directions: the sum of squares of its weights.
  const calm = 2 * share * share + (1 - 2 * share) ** 2
  const blueNoise = blurPixels2 < 0 ? calm : 1
  const redNoise = scale * (blurPixels2 > 0 ? calm : 1)
  return { values, sigma: Math.hypot(blueNoise, redNoise), scale, blurPixels2, red: scaled }
}

/** Columns of the fit: red, its Laplacian with either sign, an even light, light that grows with the square of the radius. */
const COLUMNS = 5

function fitScaleAndBlur(blue: NormalisedPlane, red: NormalisedPlane, x: number, y: number) {
  const { width, height } = blue
  const gram = new Float64Array(COLUMNS * COLUMNS)
  const moment = new Float64Array(COLUMNS)
  const column = new Float64Array(COLUMNS)
  for (let row = Math.max(1, Math.ceil(y - FIT_RADIUS)); row <= Math.min(height - 2, y + FIT_RADIUS); row++) {
    for (let across = Math.max(1, Math.ceil(x - FIT_RADIUS)); across <= Math.min(width - 2, x + FIT_RADIUS); across++) {
      const square = (across - x) ** 2 + (row - y) ** 2
      if (square > FIT_RADIUS * FIT_RADIUS) continue
      const i = row * width + across
      const r = red.values[i]
      const b = blue.values[i]
      const l = red.values[i - 1] + red.values[i + 1] + red.values[i - width] + red.values[i + width] - 4 * r
      if (b + l !== b + l) continue
      const weight = 1 / (1 + (CORE_DOUBT * b) ** 2)
      column[0] = r
      column[1] = l
      column[2] = -l
      column[3] = 1
      column[4] = square
      for (let j = 0; j < COLUMNS; j++) {
        moment[j] += weight * b * column[j]
        for (let k = 0; k < COLUMNS; k++) gram[j * COLUMNS + k] += weight * column[j] * column[k]
      }
    }
  }
  if (!(gram[0] > 0) || !(moment[0] > 0)) return null
  const plain = moment[0] / gram[0]
  const prior = 1 / (0.5 * USUAL_BLUR * plain) ** 2
  for (const j of [1, 2]) gram[j * COLUMNS + j] += prior
  const around = Math.max(0.01, lightAround(blue, red, plain, x, y))
  gram[3 * COLUMNS + 3] += 1 / (EVEN_SHARE * around) ** 2
  gram[4 * COLUMNS + 4] += 1 / ((GROWING_SHARE * around) / FIT_RADIUS ** 2) ** 2
  const solution = nonNegativeLeastSquares(gram, moment)
  const scale = solution[0]
  if (!(scale > 0)) return { scale: plain, blurPixels2: 0 }
  const blurPixels2 = (2 * (solution[1] - solution[2])) / scale
  return { scale, blurPixels2: Math.max(-MOST_BLUR, Math.min(MOST_BLUR, blurPixels2)) }
}

/** Mean of blue - scale red in the ring just outside the core, where arcs stand whose wings reach into it. */
function lightAround(blue: NormalisedPlane, red: NormalisedPlane, scale: number, x: number, y: number): number {
  const { width, height } = blue
  let sum = 0
  let count = 0
  for (let row = Math.max(0, Math.ceil(y - AROUND)); row <= Math.min(height - 1, y + AROUND); row++) {
    for (let across = Math.max(0, Math.ceil(x - AROUND)); across <= Math.min(width - 1, x + AROUND); across++) {
      const square = (across - x) ** 2 + (row - y) ** 2
      const excess = blue.values[row * width + across] - scale * red.values[row * width + across]
      if (square < FIT_RADIUS ** 2 || square > AROUND ** 2 || excess !== excess) continue
      sum += excess
      count++
    }
  }
  return count > 0 ? sum / count : 0
}

/** Kernel (share, 1 - 2 share, share) along rows, then along columns; edges repeated; NaN spreads. */
function blur(values: Float32Array, width: number, height: number, share: number): Float32Array {
  const middle = 1 - 2 * share
  const rows = new Float32Array(values.length)
  for (let y = 0; y < height; y++) {
    const start = y * width
    const end = start + width - 1
    for (let i = start; i <= end; i++) {
      rows[i] = middle * values[i] + share * (values[i > start ? i - 1 : i] + values[i < end ? i + 1 : i])
    }
  }
  const blurred = new Float32Array(values.length)
  for (let i = 0; i < values.length; i++) {
    const below = i >= width ? i - width : i
    const above = i + width < values.length ? i + width : i
    blurred[i] = middle * rows[i] + share * (rows[below] + rows[above])
  }
  return blurred
}
