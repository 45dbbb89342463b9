/**
 * A picture turned by quarters counter-clockwise as shown (row 0 at the bottom) and, from 4 on, mirrored left to right first: the
 * eight ways in which a square lies on itself. Turned by odd quarters, width and height change places.
 */
export interface Pixels {
  width: number
  height: number
  data: Float32Array
}

/** @param turned 0 to 7: quarter turns 0 to 3, mirrored first from 4 on. @throws RangeError for anything else. */
export function turnPixels({ width, height, data }: Pixels, turned: number): Pixels {
  if (!Number.isInteger(turned) || turned < 0 || turned > 7) throw new RangeError(`A turn is 0 to 7; ${turned} is not.`)
  const quarters = turned % 4
  const swapped = quarters % 2 === 1
  const to = swapped ? { width: height, height: width } : { width, height }
  const result = new Float32Array(data.length)
  for (let y = 0; y < height; y++) {
    for (let x = 0; x < width; x++) {
      const mirrored = turned >= 4 ? width - 1 - x : x
      const [toX, toY] = [
        [mirrored, y],
        [height - 1 - y, mirrored],
        [width - 1 - mirrored, height - 1 - y],
        [y, width - 1 - mirrored],
      ][quarters]
      result[toY * to.width + toX] = data[y * width + x]
    }
  }
  return { ...to, data: result }
}
