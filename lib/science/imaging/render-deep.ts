/**
 * The deep view: all bands together as one grey, stretched hard. Planes in units of their noise have equal variance, so
 * the inverse-variance mean is the plain sum over the square root of the number of bands; where a band has no data the
 * others make the pixel.
 */
import type { NormalisedPlane } from './normalise-planes'
import type { DeepLimits } from './recipe'
import { renderGrey } from './render-grey'
import { smoothBinomial } from './smooth'

/** Noise of the 3 by 3 binomial mean of independent pixels: (6/16)^(1/2) squared in two directions. */
const SMOOTHED_NOISE = 3 / 8

export function renderDeep(planes: NormalisedPlane[], limits: DeepLimits): Uint8Array {
  const { width, height } = planes[0]
  const combined = combine(planes)
  if (!limits.smooth) return renderGrey(combined, width, height, limits)
  const filled = combined.map((value) => (value !== value ? 0 : value))
  const smoothed = smoothBinomial(filled, width, height)
  for (let i = 0; i < smoothed.length; i++) {
    if (combined[i] !== combined[i]) smoothed[i] = Number.NaN
    else smoothed[i] /= SMOOTHED_NOISE
  }
  return renderGrey(smoothed, width, height, limits)
}

/** Signal-to-noise of the bands together; NaN only where no band has data. */
export function combine(planes: NormalisedPlane[]): Float32Array {
  if (planes.length === 1) return planes[0].values
  const combined = new Float32Array(planes[0].values.length)
  const whole = 1 / Math.sqrt(planes.length)
  for (let i = 0; i < combined.length; i++) {
    let sum = 0
    for (const { values } of planes) sum += values[i]
    combined[i] = sum === sum ? sum * whole : combinePresent(planes, i)
  }
  return combined
}

function combinePresent(planes: NormalisedPlane[], pixel: number): number {
  let sum = 0
  let count = 0
  for (const { values } of planes) {
    const value = values[pixel]
    if (value !== value) continue
    sum += value
    count++
  }
  return count > 0 ? sum / Math.sqrt(count) : Number.NaN
}
