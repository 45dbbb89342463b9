// GZIP_1 and GZIP_2 tiles (FITS Standard 4.0, 10.4.2 and 10.4.3): big-endian values, in GZIP_2 with all first bytes first, then
// all second bytes, and so on. Written here because fitsjs-ng refuses GZIP_2 in its header check and inflates without a bound.
import { gunzipSync } from 'node:zlib'

const INTEGER_BYTES = [1, 2, 4]

/**
 * @param count values of the tile
 * @param real true for float pixels kept whole (`valueBytes` 4 or 8); false for integers, whose width the length tells
 * @throws Error when the stream is damaged or does not hold `count` values.
 */
export function decodeGzipTile(bytes: Uint8Array, count: number, shuffled: boolean, real: 4 | 8 | null): Float64Array {
  const raw = gunzipSync(bytes, { maxOutputLength: count * 8 })
  const width = raw.length / count
  if (real !== null ? width !== real : !INTEGER_BYTES.includes(width)) {
    throw new RangeError(`it unpacks to ${raw.length} bytes, which do not make ${count} pixels`)
  }
  const plain = shuffled ? unshuffle(raw, count, width) : raw
  return bigEndianValues(plain, count, width, real !== null)
}

/** Big-endian integers (1 byte unsigned, 2 or 4 bytes signed) or reals (4 or 8 bytes). */
export function bigEndianValues(bytes: Uint8Array, count: number, width: number, real: boolean): Float64Array {
  if (bytes.length !== count * width)
    throw new RangeError(`it has ${bytes.length} bytes, which do not make ${count} pixels`)
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.length)
  const values = new Float64Array(count)
  for (let i = 0; i < count; i++) {
    if (real) values[i] = width === 4 ? view.getFloat32(i * 4) : view.getFloat64(i * 8)
    else values[i] = width === 1 ? view.getUint8(i) : width === 2 ? view.getInt16(i * 2) : view.getInt32(i * 4)
  }
  return values
}

function unshuffle(bytes: Uint8Array, count: number, width: number): Uint8Array {
  const plain = new Uint8Array(bytes.length)
  for (let byte = 0; byte < width; byte++) {
    for (let i = 0; i < count; i++) plain[i * width + byte] = bytes[byte * count + i]
  }
  return plain
}
