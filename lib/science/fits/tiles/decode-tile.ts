// One tile to the numbers that were compressed: from its own column, or from the columns that stand in for it.
import { FitsError } from '@/lib/science/fits/fits-types'
import { bigEndianValues, decodeGzipTile } from '@/lib/science/fits/tiles/gzip-tile'
import { decodeHcompress } from '@/lib/science/fits/tiles/hcompress'
import { decodePlio } from '@/lib/science/fits/tiles/plio'
import { decodeRice } from '@/lib/science/fits/tiles/rice'
import type { HeapArray, TileTable } from '@/lib/science/fits/tiles/tile-table'

export interface TileCoding {
  method: 'RICE_1' | 'GZIP_1' | 'GZIP_2' | 'PLIO_1' | 'HCOMPRESS_1'
  /** ZNAMEn -> ZVALn */
  parameters: ReadonlyMap<string, number>
  /** Of the image: ZBITPIX. */
  bitpix: number
}

export interface StoredTile {
  values: ArrayLike<number>
  /** True when the values are integers that ZSCALE and ZZERO make real; false when they are the pixels themselves. */
  quantised: boolean
}

/** @throws FitsError 'corrupt-compression' or 'unsupported', naming the tile. */
export function decodeTile(
  table: TileTable,
  row: number,
  shape: number[],
  coding: TileCoding,
  hdu: number,
): StoredTile {
  const count = shape.reduce((product, length) => product * length, 1)
  const real = coding.bitpix === -32 ? 4 : coding.bitpix === -64 ? 8 : null
  const quantised = real !== null && table.number('ZSCALE', row) !== null
  const compressed = table.heapArray('COMPRESSED_DATA', row)
  const gzipped = table.heapArray('GZIP_COMPRESSED_DATA', row)
  const raw = table.heapArray('UNCOMPRESSED_DATA', row)
  try {
    if (compressed !== null)
      return { values: decompress(compressed, shape, count, coding, quantised ? null : real), quantised }
    if (gzipped !== null) return { values: decodeGzipTile(gzipped.bytes, count, false, real), quantised: false }
    if (raw !== null)
      return { values: bigEndianValues(raw.bytes, count, raw.elementBytes, 'ED'.includes(raw.code)), quantised: false }
  } catch (cause) {
    const fault = cause instanceof UnreadError ? 'unsupported' : 'corrupt-compression'
    const advice = fault === 'unsupported' ? ' Unpack the file with funpack first.' : ''
    throw new FitsError(
      fault,
      `Tile ${row + 1} of HDU ${hdu} (${coding.method}) cannot be unpacked: ${(cause as Error).message}.${advice}`,
      { cause },
    )
  }
  throw new FitsError('corrupt-compression', `Tile ${row + 1} of HDU ${hdu} has no data.`)
}

function decompress(
  heap: HeapArray,
  shape: number[],
  count: number,
  coding: TileCoding,
  real: 4 | 8 | null,
): ArrayLike<number> {
  const { method, parameters } = coding
  if (method === 'GZIP_1' || method === 'GZIP_2') return decodeGzipTile(heap.bytes, count, method === 'GZIP_2', real)
  if (real !== null) throw new RangeError(`its pixels are reals without ZSCALE, which ${method} cannot hold`)
  if (method === 'PLIO_1') return decodePlio(heap.bytes, count)
  if (method === 'RICE_1')
    return decodeRice(heap.bytes, count, parameters.get('BLOCKSIZE') ?? 32, parameters.get('BYTEPIX') ?? 4)
  const [width, height, ...deeper] = shape
  if (deeper.some((length) => length !== 1)) throw new UnreadError('it has more than two axes')
  return decodeHcompress(heap.bytes, width, height ?? 1, (parameters.get('SMOOTH') ?? 0) !== 0)
}

class UnreadError extends RangeError {}
