/**
 * Survey pipelines fill what lies outside of an image, or a chip's gap, with one number. It looks like sky that is darker or
 * brighter than it should be; here it becomes no data.
 */
import { estimateNoise } from './noise'

/** Noise never makes a square of so many pixels a side equal, nor does coarse rounding: 4 values in 10 equal, 0.4^25 = 1e-10. */
const SIDE = 5
/** Equal pixels that stand above the sky by more than this, units of its noise, are a saturated core and no fill. */
const SATURATED_SIGMA = 5

/**
 * @param data width x height pixels, row by row.
 * @returns the same array where there is no fill or where all finite pixels are equal; else a copy, the fill NaN.
 */
export function withoutFill(data: Float32Array, width: number, height: number): Float32Array {
  const runs = equalRuns(data, width, height)
  if (runs === null) return data
  const filled = new Uint8Array(data.length)
  let found = 0
  for (let y = SIDE - 1; y < height; y++) {
    for (let x = SIDE - 1; x < width; x++) {
      if (!isEqualSquare(data, runs, width, x, y)) continue
      found++
      for (let row = y - SIDE + 1; row <= y; row++) filled.fill(1, row * width + x - SIDE + 1, row * width + x + 1)
    }
  }
  if (found === 0) return data
  const cleared = data.map((value, i) => (filled[i] === 1 ? Number.NaN : value))
  const { background, sigma, finiteFraction } = estimateNoise(cleared, width, height)
  if (finiteFraction === 0) return data
  for (let i = 0; i < data.length; i++) {
    if (filled[i] === 1 && sigma > 0 && data[i] > background + SATURATED_SIGMA * sigma) cleared[i] = data[i]
  }
  return cleared
}

/** How many pixels up to and with each one are equal along its row; null when no row has SIDE of them. */
function equalRuns(data: Float32Array, width: number, height: number): Uint8Array | null {
  const runs = new Uint8Array(data.length)
  let longest = 0
  for (let y = 0; y < height; y++) {
    let run = 1
    runs[y * width] = 1
    for (let i = y * width + 1; i < (y + 1) * width; i++) {
      run = data[i] === data[i - 1] ? (run < 255 ? run + 1 : run) : 1
      runs[i] = run
      if (run > longest) longest = run
    }
  }
  return longest >= SIDE ? runs : null
}

/** Of the square whose last pixel is (x, y). */
function isEqualSquare(data: Float32Array, runs: Uint8Array, width: number, x: number, y: number): boolean {
  const value = data[y * width + x]
  for (let row = y; row > y - SIDE; row--) {
    if (runs[row * width + x] < SIDE || data[row * width + x] !== value) return false
  }
  return true
}
