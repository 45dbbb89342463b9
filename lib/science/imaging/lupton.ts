/**
 * Colour composite of three images that keeps hue: R. Lupton et al., PASP 116, 133 (2004).
 *   I = (r + g + b) / 3,  factor = slope asinh(I Q / stretch) / I,  slope = 25.5 / asinh(0.1 Q)
 * so an intensity of 0.1 stretch becomes 25.5 of 255. A pixel with a channel of 255 or more is scaled down as a whole.
 * This is the convention of astropy's `make_lupton_rgb` (5.2), not the paper's own alpha and Q. Counts are truncated,
 * not rounded. |Q| below 2^-23 is taken as 0.1, above 1e10 as 1e10.
 */
export interface LuptonOptions {
  /** Value that becomes black, one for all channels or one each for r, g, b. */
  minimum?: number | readonly [number, number, number]
  /** Intensity scale in pixel units, above 0. */
  stretch?: number
  /** Softening: how early the curve turns from linear to logarithmic. */
  Q?: number
}

const LEAST_Q = 2 ** -23
const MOST_Q = 1e10

/**
 * RGB counts interleaved, same pixel order as the input. A pixel with a channel that is not finite is black.
 * @throws RangeError when the channels differ in length or the stretch is not positive.
 */
export function luptonRgb(
  r: ArrayLike<number>,
  g: ArrayLike<number>,
  b: ArrayLike<number>,
  { minimum = 0, stretch = 5, Q = 8 }: LuptonOptions = {},
): Uint8Array {
  if (r.length !== g.length || r.length !== b.length) {
    throw new RangeError(`The channels differ in size (${r.length}, ${g.length}, ${b.length} pixels).`)
  }
  if (!(stretch > 0)) throw new RangeError(`The stretch must be above 0, not ${stretch}.`)
  const [minimumR, minimumG, minimumB] = typeof minimum === 'number' ? [minimum, minimum, minimum] : minimum
  const q = Math.abs(Q) < LEAST_Q ? 0.1 : Math.min(Q, MOST_Q)
  const slope = 25.5 / Math.asinh(0.1 * q)
  const perUnit = q / stretch
  const pixels = new Uint8Array(3 * r.length)
  for (let i = 0, out = 0; i < r.length; i++, out += 3) {
    const red = r[i] - minimumR
    const green = g[i] - minimumG
    const blue = b[i] - minimumB
    const intensity = (red + green + blue) / 3
    // Also refuses NaN; an infinite channel gives 0/0 or Infinity * 0 below and is written as 0.
    if (!(intensity > 0)) continue
    let factor = (asinhOfPositive(intensity * perUnit) * slope) / intensity
    const largest = (red > green ? (red > blue ? red : blue) : green > blue ? green : blue) * factor
    if (largest >= 255) factor *= 255 / largest
    pixels[out] = red > 0 ? red * factor : 0
    pixels[out + 1] = green > 0 ? green * factor : 0
    pixels[out + 2] = blue > 0 ? blue * factor : 0
  }
  return pixels
}

/** asinh for x >= 0 at a third of the cost of Math.asinh; the series below 0.01 keeps 1e-14 relative. */
function asinhOfPositive(x: number): number {
  const square = x * x
  if (x < 0.01) return x * (1 - square * (1 / 6 - square * (3 / 40)))
  return Math.log(x + Math.sqrt(square + 1))
}

/**
 * The (stretch, Q) at which `luptonRgb` is linear below `softening` and reaches 255 at the intensity `white` (both
 * above the minimum, same unit): asinh(white Q / stretch) slope = 255 with stretch = softening Q gives
 *   Q = 10 sinh( asinh(white / softening) / 10 ).
 * @param white, softening above 0.
 */
export function luptonFromLimits(white: number, softening: number): { stretch: number; Q: number } {
  const Q = 10 * Math.sinh(Math.asinh(white / softening) / 10)
  return { stretch: softening * Q, Q }
}
