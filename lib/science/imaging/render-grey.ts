/**
 * One noise-normalised plane as a grey picture: black and white points, asinh between them (Lupton et al. 1999, AJ 118,
 * 1406).
 */
import type { LimitsSigma } from './recipe'
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

/**
 * Greys of the steps, worked out backwards: grey k begins where 255 y = k - 1/2, which is at
 *   x = a sinh((k - 1/2) / 255 asinh(1 / a)).
 * The curve is steepest at black, so the table has 16 times more entries than the picture has greys.
 */
function brightnessTable(softening: number): Uint8Array {
  const table = new Uint8Array(STEPS + 1)
  const perGrey = Math.asinh(1 / softening) / 255
  let from = 0
  for (let grey = 0; grey <= 255; grey++) {
    const end = grey === 255 ? STEPS + 1 : Math.ceil(softening * Math.sinh((grey + 0.5) * perGrey) * STEPS - 0.5)
    table.fill(grey, from, end)
    from = Math.max(from, end)
  }
  return table
}
