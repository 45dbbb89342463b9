import { Scratch } from './scratch'

const rowsSmoothed = new Scratch()

/**
 * Binomial smoothing over 3 by 3 pixels, kernel (1 2 1) x (1 2 1) / 16, edges repeated. Independent noise falls to 3/8
 * of its size. The result is multiplied by `gain`. Missing (NaN) pixels spread to their neighbours, so replace them
 * first. `into` may be `values` themselves; both may be longer than the picture.
 */
export function smoothBinomial(
  values: Float32Array,
  width: number,
  height: number,
  gain = 1,
  into: Float32Array = new Float32Array(width * height),
): Float32Array {
  const rows = rowsSmoothed.take(width * height)
  for (let y = 0; y < height; y++) {
    const start = y * width
    const end = start + width - 1
    let before = values[start]
    let here = before
    for (let i = start; i < end; i++) {
      const after = values[i + 1]
      rows[i] = (before + 2 * here + after) * 0.25
      before = here
      here = after
    }
    rows[end] = (before + 3 * here) * 0.25
  }
  const share = gain / 4
  const smoothed = into
  for (let y = 0; y < height; y++) {
    const here = y * width
    const above = y > 0 ? here - width : here
    const below = y < height - 1 ? here + width : here
    for (let x = 0; x < width; x++) {
      smoothed[here + x] = (rows[above + x] + 2 * rows[here + x] + rows[below + x]) * share
    }
  }
  return smoothed
}
