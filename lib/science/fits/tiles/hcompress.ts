// HCOMPRESS_1 tiles (FITS Standard 4.0, 10.4.5). Written here because fitsjs-ng decodes them in 32-bit arithmetic, which wraps
// around on quantised images with blank pixels: their integers lie near -2^31 and the transform makes sums of them. Doubles
// hold those sums exactly up to 2^53.
import { BitReader } from '@/lib/science/fits/tiles/bit-reader'
import { invertHTransform } from '@/lib/science/fits/tiles/h-transform'
import { addBitPlanes } from '@/lib/science/fits/tiles/quadtree'

/** Two magic bytes; rows, columns and scale as int32; the sum as int64; three counts of bit planes. */
const HEADER_BYTES = 25

/**
 * @param width pixels along axis 1 of the tile, @param height along axis 2, @param smoothed the SMOOTH parameter.
 * @returns width * height integers, row by row.
 * @throws RangeError when the stream is damaged or is not of this size.
 */
export function decodeHcompress(bytes: Uint8Array, width: number, height: number, smoothed: boolean): Float64Array {
  if (bytes.length < HEADER_BYTES) throw new RangeError('its stream ends before the tile is full')
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.length)
  if (view.getUint16(0) !== 0xdd99) throw new RangeError('its stream does not begin as HCOMPRESS does')
  const [rows, columns, scale] = [view.getInt32(2), view.getInt32(6), Math.max(1, view.getInt32(10))]
  if (rows !== height || columns !== width) {
    throw new RangeError(`its stream is of ${columns} x ${rows} pixels, not ${width} x ${height}`)
  }
  const sum = Number(view.getBigInt64(14))
  const planes = [bytes[22], bytes[23], bytes[24]]
  refuseInexact(sum, planes, scale)
  const values = new Float64Array(rows * columns)
  const [top, left] = [(rows + 1) >> 1, (columns + 1) >> 1]
  const reader = new BitReader(bytes, HEADER_BYTES)
  const quadrant = (row: number, column: number, high: number, wide: number) => ({
    start: row * columns + column,
    stride: columns,
    rows: high,
    columns: wide,
  })
  addBitPlanes(reader, values, quadrant(0, 0, top, left), planes[0])
  addBitPlanes(reader, values, quadrant(0, left, top, columns - left), planes[1])
  addBitPlanes(reader, values, quadrant(top, 0, rows - top, left), planes[1])
  addBitPlanes(reader, values, quadrant(top, left, rows - top, columns - left), planes[2])
  if (reader.take(4) !== 0) throw new RangeError('its stream is damaged')
  reader.align()
  for (let i = 0; i < values.length; i++) {
    if (values[i] !== 0 && reader.take(1) === 1) values[i] = -values[i]
  }
  values[0] = sum
  if (scale > 1) for (let i = 0; i < values.length; i++) values[i] *= scale
  invertHTransform(values, rows, columns, smoothed ? scale >> 1 : 0)
  return values
}

/**
 * With B above every coefficient and S the sum, both times the scale, no step goes beyond max(S, 3 B) + 3 B and rounding,
 * because each new sum is (sum + three differences) / 2. Real tiles stay far below 2^52: 32-bit pixels, 2^12 rows at most.
 */
function refuseInexact(sum: number, planes: number[], scale: number): void {
  const coefficient = 2 ** Math.max(...planes) * scale
  if (Math.max(Math.abs(sum) * scale, 3 * coefficient) + 3 * coefficient >= 2 ** 52) {
    throw new RangeError('its stream is damaged: its sums are larger than any image has')
  }
}
