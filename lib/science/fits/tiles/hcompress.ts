// HCOMPRESS_1 tiles (FITS Standard 4.0, 10.4.5; R. White, M. Postman & M. Lattanzi 1992) through fitsjs-ng. The package is
// loaded with the first such tile, because loading it takes about 70 ms.

const HEADER_BYTES = 25
const INT32_LIMIT = 2 ** 31

/**
 * @param width pixels along axis 1 of the tile, @param height along axis 2, @param smooth the SMOOTH parameter.
 * @returns width * height integers, row by row.
 * @throws RangeError when the stream is damaged or needs more than the 32-bit arithmetic of the package.
 */
export async function decodeHcompress(
  bytes: Uint8Array,
  width: number,
  height: number,
  smooth: boolean,
): Promise<ArrayLike<number>> {
  refuseWhatWouldOverflow(bytes, width, height)
  const { CompressedImage, Header } = await import('fitsjs-ng')
  class Tile extends CompressedImage {
    /** The integers as decoded; getFrame would round those beyond 2^24 to float32. */
    stored(row: DataView): ArrayLike<number> {
      return this.accessors[0](row, 0)[0] as ArrayLike<number>
    }
  }
  const row = new Uint8Array(8 + bytes.length)
  const view = new DataView(row.buffer)
  view.setInt32(0, bytes.length)
  row.set(bytes, 8)
  const tile = new Tile(new Header(oneTileHeader(bytes.length, width, height, smooth), undefined, () => {}), row.buffer)
  const pixels = tile.stored(view)
  if (pixels.length !== width * height)
    throw new RangeError(`it holds ${pixels.length} pixels, not ${width} x ${height}`)
  return pixels
}

/** The smallest header that the package takes: one row, one column, one tile of 32-bit integers. */
function oneTileHeader(length: number, width: number, height: number, smooth: boolean): string {
  const cards: [string, string | number][] = [
    ['XTENSION', "'BINTABLE'"],
    ['BITPIX', 8],
    ['NAXIS', 2],
    ['NAXIS1', 8],
    ['NAXIS2', 1],
    ['PCOUNT', length],
    ['GCOUNT', 1],
    ['TFIELDS', 1],
    ['TTYPE1', "'COMPRESSED_DATA'"],
    ['TFORM1', `'1PB(${length})'`],
    ['ZIMAGE', 'T'],
    ['ZCMPTYPE', "'HCOMPRESS_1'"],
    ['ZBITPIX', 32],
    ['ZNAXIS', 2],
    ['ZNAXIS1', width],
    ['ZNAXIS2', height],
    ['ZTILE1', width],
    ['ZTILE2', height],
    ['ZNAME1', "'SMOOTH'"],
    ['ZVAL1', smooth ? 1 : 0],
  ]
  return cards.map(([keyword, value]) => `${keyword.padEnd(8)}= ${value}`.padEnd(80)).join('')
}

/**
 * Stream: 2 magic bytes, rows and columns and scale as int32, the sum as int64, three counts of bit planes. With B the largest
 * coefficient and S the sum, both times the scale, no step of the inverse transform goes beyond max(S, 3 B) + 3 B plus
 * rounding: each new corner is (corner + three details) / 2. Below 2^31 the package is exact; beyond, it would wrap around.
 */
function refuseWhatWouldOverflow(bytes: Uint8Array, width: number, height: number): void {
  if (bytes.length < HEADER_BYTES) throw new RangeError('its stream is cut off')
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.length)
  const [slow, fast, scale] = [view.getInt32(2), view.getInt32(6), Math.max(1, view.getInt32(10))]
  if (slow !== height || fast !== width)
    throw new RangeError(`its stream is of ${fast} x ${slow} pixels, not ${width} x ${height}`)
  const coefficient = 2 ** Math.max(bytes[22], bytes[23], bytes[24]) * scale
  const sum = Math.abs(Number(view.getBigInt64(14))) * scale
  const rounding = 8 * Math.max(width, height) + scale
  if (Math.max(sum, 3 * coefficient) + 3 * coefficient + rounding >= INT32_LIMIT) {
    throw new OverflowError()
  }
}

/** Right but wider than what is read. */
export class OverflowError extends RangeError {
  constructor() {
    super('its numbers need more than 32 bits')
  }
}
