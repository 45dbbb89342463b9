/** One noise-normalised plane as a grey picture: black and white points, asinh between them (Lupton et al. 1999, AJ 118, 1406). */
import type { LimitsSigma } from './recipe'
import { asinhStretch } from './stretches'
import { whiteLevel } from './white-level'

/** Grey of pixels without data: apart from the sky's near-black and from any galaxy's light, without hue. */
export const MISSING_GREY = 72

const STEPS = 4096

/**
 * Pixels row 0 = top from `values` with row 0 = bottom. 8-bit rule: round half up of 255 y, read from a table of 4096
 * brightness steps, so within one count of the exact curve.
 */
export function renderGrey(values: Float32Array, width: number, height: number, limits: LimitsSigma): Uint8Array {
  const black = limits.blackSigma
  const range = whiteLevel(values, limits) - black
  const table = brightnessTable(limits.softeningSigma / range)
  const scale = STEPS / range
  const pixels = new Uint8Array(width * height)
  for (let y = 0; y < height; y++) {
    let out = (height - 1 - y) * width
    for (let i = y * width; i < (y + 1) * width; i++, out++) {
      const step = (values[i] - black) * scale
      if (step !== step) pixels[out] = MISSING_GREY
      else pixels[out] = table[step < 0 ? 0 : step > STEPS ? STEPS : step | 0]
    }
  }
  return pixels
}

/** The curve is steepest at black, so the table has more entries than the picture has greys by a factor of 16. */
function brightnessTable(softening: number): Uint8Array {
  const curve = asinhStretch(softening)
  const table = new Uint8Array(STEPS + 1)
  for (let i = 0; i <= STEPS; i++) table[i] = Math.floor(255 * curve(Math.min(1, (i + 0.5) / STEPS)) + 0.5)
  return table
}
