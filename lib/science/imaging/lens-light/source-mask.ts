/** Which pixels hold light that is not the galaxy's: bluer than its core, or above what the model allows. */
import type { BlueMinusRed } from '../blue-minus-red'
import { smoothBinomial } from '../smooth'
import type { RadialProfile } from './gaussian-profile'
import { ABOVE, COUNTED, FOREIGN } from './profile-rows'

/** Noise of the 3 by 3 binomial mean. */
const SMOOTHED_NOISE = 3 / 8
const THRESHOLD = 2.5
/** Share of the galaxy's light by which colour gradients and seeing may fool the colour mask. */
const COLOUR_DOUBT = 0.05
/** Pixels by which ellipses may be off without their residual being taken for something else. */
const CENTRE_DOUBT = 0.15
/** The model's pixels within this radius are never masked by it: there the model has nothing else to go by. */
const CORE = 2.5

/** Smoothed, with gaps at the given level. */
function smoothed(values: Float32Array, width: number, height: number): Float32Array {
  let filled = values
  for (let i = 0; i < values.length; i++) {
    if (values[i] === values[i]) continue
    if (filled === values) filled = values.slice()
    filled[i] = 0
  }
  return smoothBinomial(filled, width, height)
}

/** Marks as foreign where the picture blue minus red stands out of its noise, and one pixel round. Returns it smoothed. */
export function markBluer(
  mask: Uint8Array,
  { values, sigma, red }: BlueMinusRed,
  width: number,
  height: number,
): Float32Array {
  const smooth = smoothed(values, width, height)
  const noise = (SMOOTHED_NOISE * sigma) ** 2
  const limit = THRESHOLD * THRESHOLD
  const found = new Uint8Array(mask.length)
  for (let i = 0; i < mask.length; i++) {
    const excess = smooth[i]
    if (excess > 0 && excess * excess > limit * (noise + (COLOUR_DOUBT * red[i]) ** 2)) found[i] = 1
  }
  for (let y = 0; y < height; y++) {
    for (let x = 0; x < width; x++) {
      if (found[y * width + x] === 0) continue
      for (let row = Math.max(0, y - 1); row <= Math.min(height - 1, y + 1); row++) {
        for (let column = Math.max(0, x - 1); column <= Math.min(width - 1, x + 1); column++) {
          const i = row * width + column
          if (mask[i] === COUNTED) mask[i] = FOREIGN
        }
      }
    }
  }
  return smooth
}

/** Marks as of no use where the residual of the model stands out. */
export function markAbove(
  mask: Uint8Array,
  values: Float32Array,
  radii: Float32Array,
  profile: RadialProfile,
  width: number,
  height: number,
  shapeDoubt: number,
): void {
  const residual = new Float32Array(values.length)
  const light = new Float32Array(values.length)
  for (let i = 0; i < values.length; i++) {
    light[i] = profile.at(radii[i])
    residual[i] = values[i] - light[i] - profile.pedestal
  }
  const smooth = smoothed(residual, width, height)
  const limit = THRESHOLD * THRESHOLD
  for (let i = 0; i < mask.length; i++) {
    if (radii[i] < CORE || !(smooth[i] > 0)) continue
    const steep = CENTRE_DOUBT * profile.slopeAt(radii[i])
    const noise = SMOOTHED_NOISE * SMOOTHED_NOISE + (shapeDoubt * light[i]) ** 2 + steep * steep
    if (smooth[i] * smooth[i] > limit * noise && mask[i] === COUNTED) mask[i] = ABOVE
  }
}
