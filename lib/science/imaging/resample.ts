/**
 * A picture on another grid. Brightness at a place is interpolated bilinearly between the four pixels round it; where the
 * new pixels are larger it is the mean of several such places. Values are multiplied by the ratio of the pixels' areas, as
 * flux in a pixel is, so sums over an object stay (to about 1 % for objects wider than two pixels). Bilinear and not Lanczos,
 * because its weights are never negative: no ripples round stars and gaps. It blurs by up to 1/4 pixel^2 of variance in each
 * direction and lowers the noise of single pixels; grids that fall on each other are copied exactly.
 */

export interface GridMap {
  width: number
  height: number
  /** Source pixel of new pixel (x, y): (x0 + xx x + xy y, y0 + yx x + yy y). */
  x0: number
  y0: number
  xx: number
  xy: number
  yx: number
  yy: number
}

/** Rounding that a place may have and still count as a pixel's middle. */
const ON_PIXEL = 1e-6

/** NaN where less than half of a new pixel's weight has data. Rows as in the source, row 0 = bottom. */
export function resample(source: Float32Array, width: number, height: number, map: GridMap): Float32Array {
  const area = Math.abs(map.xx * map.yy - map.xy * map.yx)
  const side = Math.sqrt(area)
  const points = side > 1.01 ? Math.ceil(2 * side) : 1
  const result = new Float32Array(map.width * map.height)
  for (let row = 0; row < map.height; row++) {
    for (let column = 0; column < map.width; column++) {
      let sum = 0
      let seen = 0
      for (let j = 0; j < points; j++) {
        const y = row + (j + 0.5) / points - 0.5
        for (let i = 0; i < points; i++) {
          const x = column + (i + 0.5) / points - 0.5
          const at = interpolate(
            source,
            width,
            height,
            map.x0 + map.xx * x + map.xy * y,
            map.y0 + map.yx * x + map.yy * y,
          )
          if (at !== at) continue
          sum += at
          seen++
        }
      }
      result[row * map.width + column] = 2 * seen >= points * points ? (area * sum) / seen : Number.NaN
    }
  }
  return result
}

function interpolate(source: Float32Array, width: number, height: number, x: number, y: number): number {
  const nearX = Math.round(x)
  const nearY = Math.round(y)
  if (Math.abs(x - nearX) < ON_PIXEL && Math.abs(y - nearY) < ON_PIXEL) {
    return nearX >= 0 && nearX < width && nearY >= 0 && nearY < height ? source[nearY * width + nearX] : Number.NaN
  }
  const left = Math.floor(x)
  const bottom = Math.floor(y)
  let sum = 0
  let weights = 0
  for (let j = 0; j <= 1; j++) {
    const row = bottom + j
    if (row < 0 || row >= height) continue
    const weightY = j === 0 ? bottom + 1 - y : y - bottom
    for (let i = 0; i <= 1; i++) {
      const column = left + i
      if (column < 0 || column >= width) continue
      const value = source[row * width + column]
      const weight = weightY * (i === 0 ? left + 1 - x : x - left)
      if (value - value !== 0) continue
      sum += weight * value
      weights += weight
    }
  }
  return weights >= 0.5 ? sum / weights : Number.NaN
}
