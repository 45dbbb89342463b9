/**
 * Draws a sheet pixel by pixel, in plain JavaScript: what a shader does where there is one (components/light/sheet-shader.ts),
 * with the same formula. With I the mean of the channels above black and x = I / (white - black), each channel c becomes
 *   255 c y(x) / I,
 * which keeps its hue (R. Lupton et al., PASP 116, 133, 2004); a pixel with a channel above 255 is scaled down as a whole.
 * For a grey sheet c = I. y is the curve: asinh and log with a = softening / (white - black), square root, or straight; it
 * goes on above x = 1 as it is.
 */
import { MISSING_GREY } from './render-grey'
import type { ViewSheet } from './view-sheet'

export const CURVES = ['asinh', 'log', 'sqrt', 'linear'] as const
export type Curve = (typeof CURVES)[number]

export interface DrawOptions {
  /** In units of the noise, counted from the sky. */
  blackSigma: number
  /** Held at 0.1 or more above black. */
  whiteSigma: number
  /** Above 0; square root and straight do not use it. */
  softeningSigma: number
  curve: Curve
  invert: boolean
}

export const LEAST_RANGE_SIGMA = 0.1

export const rangeOf = ({ blackSigma, whiteSigma }: DrawOptions): number =>
  Math.max(LEAST_RANGE_SIGMA, whiteSigma - blackSigma)

/** y(x) for x >= 0. */
export function curveOf(curve: Curve, softening: number): (x: number) => number {
  if (curve === 'asinh') {
    const scale = 1 / Math.asinh(1 / softening)
    return (x) => Math.asinh(x / softening) * scale
  }
  if (curve === 'log') {
    const scale = 1 / Math.log1p(1 / softening)
    return (x) => Math.log1p(x / softening) * scale
  }
  return curve === 'sqrt' ? Math.sqrt : (x) => x
}

/** RGBA, row 0 = top, into `pixels` (4 width height). Colour counts are cut off, grey ones rounded, as in the PNGs. */
export function drawSheet(sheet: ViewSheet, options: DrawOptions, pixels: Uint8ClampedArray | Uint8Array): void {
  const { width, height, colour, red, green, blue, missing } = sheet
  const { blackSigma: black, invert } = options
  const range = rangeOf(options)
  const y = curveOf(options.curve, options.softeningSigma / range)
  const rounding = colour ? 0 : 0.5
  const flip = invert ? 255 : 0
  for (let row = 0; row < height; row++) {
    let out = 4 * (height - 1 - row) * width
    for (let i = row * width; i < (row + 1) * width; i++, out += 4) {
      const r = red[i] - black
      const g = green[i] - black
      const b = blue[i] - black
      const intensity = (r + g + b) / 3
      let factor = intensity > 0 ? (255 * y(intensity / range)) / intensity : 0
      const largest = Math.max(r, g, b) * factor
      if (largest > 255) factor *= 255 / largest
      const none = missing[i] === 1
      pixels[out] = Math.abs(flip - (none ? MISSING_GREY : Math.floor(Math.max(0, r) * factor + rounding)))
      pixels[out + 1] = Math.abs(flip - (none ? MISSING_GREY : Math.floor(Math.max(0, g) * factor + rounding)))
      pixels[out + 2] = Math.abs(flip - (none ? MISSING_GREY : Math.floor(Math.max(0, b) * factor + rounding)))
      pixels[out + 3] = 255
    }
  }
}
