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
  return renderGrey(deepValues(planes, limits), width, height, limits)
}

/** What the deep view shows, in units of its noise, row 0 = bottom; NaN only where no band has data. */
export function deepValues(planes: NormalisedPlane[], limits: DeepLimits): Float32Array {
  const { width, height } = planes[0]
  const combined = combine(planes)
  if (!limits.smooth) return combined
  const gaps = fillGaps(combined)
  const smoothed = smoothBinomial(combined, width, height, 1 / SMOOTHED_NOISE)
  for (const pixel of gaps) smoothed[pixel] = Number.NaN
  return smoothed
}

/** Puts the sky level where there is no data, and says where that was. In place. */
function fillGaps(values: Float32Array): number[] {
  const gaps: number[] = []
  for (let i = 0; i < values.length; i++) {
    if (values[i] === values[i]) continue
    values[i] = 0
    gaps.push(i)
  }
  return gaps
}

/** Signal-to-noise of the bands together; NaN only where no band has data. */
export function combine(planes: NormalisedPlane[]): Float32Array {
  const combined = planes[0].values.slice()
  for (const { values } of planes.slice(1)) for (let i = 0; i < combined.length; i++) combined[i] += values[i]
  const whole = 1 / Math.sqrt(planes.length)
  for (let i = 0; i < combined.length; i++) {
    const sum = combined[i]
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
