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
 * HCOMPRESS with loss leaves flat blocks of the sky, each of its own mean: squares of FLAT_SIDE pixels a side then have at
 * least 6 values where any of SIDE is there (astropy 5.2.1, 80 x 80 pixels of noise with a galaxy, 25 seeds, steps of 0.12
 * to 1 sigma, scales 4 to 8). Pipelines fill with one number, or with two.
 */
const FLAT_SIDE = 4
const MOST_FILL_VALUES = 2
/** No flat block of sky is darker than the sky by more than this, units of its noise. */
const DARK_SIGMA = 10

/**
 * @param data width x height pixels, row by row.
 * @returns the same array where there is no fill or where all finite pixels are equal; else a copy, the fill NaN. Where lossy
 * compression left flat blocks, only what is far darker than any sky is fill.
 */
export function withoutFill(data: Float32Array, width: number, height: number): Float32Array {
  const runs = equalRuns(data, width, height)
  if (runs === null) return data
  const square = new Uint8Array(data.length)
  let found = 0
  eachEqualSquare(data, runs, width, height, SIDE, (x, y) => {
    found++
    for (let row = y - SIDE + 1; row <= y; row++) square.fill(1, row * width + x - SIDE + 1, row * width + x + 1)
  })
  if (found === 0) return data
  const rest = data.map((value, i) => (square[i] === 1 ? Number.NaN : value))
  const { background, sigma, finiteFraction } = estimateNoise(rest, width, height)
  if (finiteFraction === 0) return data
  const flat = new Set<number>()
  const saturated = sigma > 0 ? background + SATURATED_SIGMA * sigma : Infinity
  eachEqualSquare(data, runs, width, height, FLAT_SIDE, (x, y) => {
    const value = data[y * width + x]
    if (value <= saturated) flat.add(value)
  })
  const brightest = flat.size <= MOST_FILL_VALUES ? saturated : darkerThanSky(data, width, height)
  return data.map((value, i) => (square[i] === 1 && value <= brightest ? Number.NaN : value))
}

function darkerThanSky(data: Float32Array, width: number, height: number): number {
  const { background, sigma } = estimateNoise(data, width, height)
  return background - DARK_SIGMA * sigma
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

/** Calls `visit` with the last pixel of each square of `side` equal pixels a side. */
function eachEqualSquare(
  data: Float32Array,
  runs: Uint8Array,
  width: number,
  height: number,
  side: number,
  visit: (x: number, y: number) => void,
): void {
  for (let y = side - 1; y < height; y++) {
    for (let x = side - 1; x < width; x++) {
      if (isEqualSquare(data, runs, width, side, y * width + x)) visit(x, y)
    }
  }
}

function isEqualSquare(data: Float32Array, runs: Uint8Array, width: number, side: number, last: number): boolean {
  for (let i = last; i > last - side * width; i -= width) {
    if (runs[i] < side || data[i] !== data[last]) return false
  }
  return true
}
