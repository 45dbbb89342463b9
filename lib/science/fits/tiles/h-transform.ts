// The inverse H-transform of HCOMPRESS: from one number for the whole tile, each step splits a sum of 2 x 2 into its four
// parts by three differences. Numbers are doubles that hold integers; what two's complement does with bits is written as
// division by powers of two. Source: R. White, M. Postman & M. Lattanzi 1992; rounding as in CFITSIO's hinv64, which is the
// reference the format is judged by (no source in print gives it).

/** In place. `values` has `rows` rows of `columns`; `smoothing` is half the scale, or 0 for none. */
export function invertHTransform(values: Float64Array, rows: number, columns: number, smoothing: number): void {
  const levels = Math.ceil(Math.log2(Math.max(rows, columns)))
  if (levels === 0) return
  const line = new Float64Array(Math.max(rows, columns))
  values[0] = roundTo(values[0], 2 ** (levels + 1))
  for (let level = levels - 1; level >= 0; level--) {
    const [high, wide] = [Math.ceil(rows / 2 ** level), Math.ceil(columns / 2 ** level)]
    for (let row = 0; row < high; row++) interleave(values, row * columns, 1, wide, line)
    for (let column = 0; column < wide; column++) interleave(values, column, columns, high, line)
    if (smoothing > 0) smooth(values, high, wide, columns, smoothing)
    splitAll(values, high, wide, columns, 2 ** level, level === 0 ? 4 : 2)
  }
}

/** Sums lie in the first half of a line and differences in the second: puts them side by side. */
function interleave(values: Float64Array, start: number, stride: number, count: number, line: Float64Array): void {
  const half = (count + 1) >> 1
  for (let i = 0; i < count; i++) line[i] = values[start + i * stride]
  for (let i = 0; i < count; i++) values[start + i * stride] = line[(i & 1) === 0 ? i >> 1 : half + (i >> 1)]
}

function splitAll(
  values: Float64Array,
  high: number,
  wide: number,
  stride: number,
  bit: number,
  divisor: number,
): void {
  for (let row = 0; row < high; row += 2) {
    for (let column = 0; column < wide; column += 2) {
      const at = row * stride + column
      const right = column + 1 < wide
      const below = row + 1 < high
      if (right && below) splitFour(values, at, stride, bit, divisor)
      else if (below) splitTwo(values, at, at + stride, bit, divisor)
      else if (right) splitTwo(values, at, at + 1, bit, divisor)
      else values[at] = Math.floor(values[at] / divisor)
    }
  }
}

function splitFour(values: Float64Array, at: number, stride: number, bit: number, divisor: number): void {
  const [bit1, below, right, corner] = [2 * bit, at + stride, at + 1, at + stride + 1]
  const both = roundTo(values[corner], bit)
  const low0 = bitOf(both, bit) * bit
  const down = towardZero(roundTo(values[below], bit1), low0)
  const across = towardZero(roundTo(values[right], bit1), low0)
  const low1 = ((bitOf(both, bit1) + bitOf(down, bit1) + bitOf(across, bit1)) % 2) * bit1
  const sum = values[at]
  const whole = sum >= 0 ? sum + low0 - low1 : sum + (low0 === 0 ? low1 : low0 - low1)
  values[corner] = Math.floor((whole + down + across + both) / divisor)
  values[below] = Math.floor((whole + down - across - both) / divisor)
  values[right] = Math.floor((whole - down + across - both) / divisor)
  values[at] = Math.floor((whole - down - across + both) / divisor)
}

/** At an odd edge there is one difference only. */
function splitTwo(values: Float64Array, at: number, other: number, bit: number, divisor: number): void {
  const difference = roundTo(values[other], 2 * bit)
  const whole = towardZero(values[at], bitOf(difference, 2 * bit) * 2 * bit)
  values[other] = Math.floor((whole + difference) / divisor)
  values[at] = Math.floor((whole - difference) / divisor)
}

function towardZero(value: number, step: number): number {
  return value >= 0 ? value - step : value + step
}

/** Nearest multiple of `unit`, halves away from zero; 1 leaves integers alone. */
function roundTo(value: number, unit: number): number {
  if (unit === 1) return value
  return Math.floor((value + (value >= 0 ? unit / 2 : unit / 2 - 1)) / unit) * unit
}

/** The bit of weight `weight` in two's complement: 0 or 1. */
function bitOf(value: number, weight: number): number {
  const quotient = Math.floor(value / weight)
  return quotient - 2 * Math.floor(quotient / 2)
}

/** Slopes of the sums set the differences that quantisation lost, by at most `limit` (CFITSIO's hsmooth64). */
function smooth(values: Float64Array, high: number, wide: number, stride: number, limit: number): void {
  const clamp = (value: number, low: number, top: number) => Math.max(Math.min(value, top), low)
  const adjust = (at: number, slope: number, low: number, top: number, parts: number) => {
    if (!(low < top)) return
    const step = Math.trunc((clamp(slope, low, top) - values[at] * parts) / parts)
    values[at] += clamp(step, -limit, limit)
  }
  const along = (at: number, other: number, before: number, after: number) => {
    const [up, down] = [values[after] - values[at], values[at] - values[before]]
    adjust(
      other,
      values[after] - values[before],
      Math.min(Math.max(up, down), 0) * 4,
      Math.max(Math.min(up, down), 0) * 4,
      8,
    )
  }
  for (let row = 2; row < high - 2; row += 2) {
    for (let column = 0; column < wide; column += 2) {
      const at = row * stride + column
      along(at, at + stride, at - 2 * stride, at + 2 * stride)
    }
  }
  for (let row = 0; row < high; row += 2) {
    for (let column = 2; column < wide - 2; column += 2) {
      const at = row * stride + column
      along(at, at + 1, at - 2, at + 2)
    }
  }
  for (let row = 2; row < high - 2; row += 2) {
    for (let column = 2; column < wide - 2; column += 2) {
      const at = row * stride + column
      const [mm, pm] = [values[at - 2 * stride - 2], values[at + 2 * stride - 2]]
      const [mp, pp] = [values[at - 2 * stride + 2], values[at + 2 * stride + 2]]
      const [here, x, y] = [values[at], 2 * values[at + stride], 2 * values[at + 1]]
      const top = Math.min(
        Math.min(Math.max(pp - here, 0) - x - y, Math.max(here - pm, 0) + x - y),
        Math.min(Math.max(here - mp, 0) - x + y, Math.max(mm - here, 0) + x + y),
      )
      const low = Math.max(
        Math.max(Math.min(pp - here, 0) - x - y, Math.min(here - pm, 0) + x - y),
        Math.max(Math.min(here - mp, 0) - x + y, Math.min(mm - here, 0) + x + y),
      )
      adjust(at + stride + 1, pp + mm - mp - pm, low * 16, top * 16, 64)
    }
  }
}
