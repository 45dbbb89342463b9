// A tile-compressed image (FITS Standard 4.0, section 10): tiles decoded one by one, quantised floats made real again, blank
// pixels NaN, each tile laid in its place. Nothing here is guessed: what is not understood is refused.
import { readScaling, type Scaling } from '@/lib/science/fits/decode-array'
import type { Unit } from '@/lib/science/fits/find-units'
import { FitsError, type FitsHeader, type FitsImage, type FitsValue } from '@/lib/science/fits/fits-types'
import { axisLengths, bitsPerPixel, integerValue } from '@/lib/science/fits/header-values'
import { decodeTile, type TileCoding } from '@/lib/science/fits/tiles/decode-tile'
import { physicalValues, type Quantisation } from '@/lib/science/fits/tiles/physical-values'
import { TileTable } from '@/lib/science/fits/tiles/tile-table'

const METHODS: Readonly<Record<string, TileCoding['method']>> = {
  RICE_1: 'RICE_1',
  RICE_ONE: 'RICE_1', // alias that fpack writes for dithered images; section 10.4.1 has RICE_1 only
  GZIP_1: 'GZIP_1',
  GZIP_2: 'GZIP_2',
  PLIO_1: 'PLIO_1',
  HCOMPRESS_1: 'HCOMPRESS_1',
}
const QUANTISATIONS: readonly string[] = ['NONE', 'NO_DITHER', 'SUBTRACTIVE_DITHER_1', 'SUBTRACTIVE_DITHER_2']

/** The caller has checked that the bytes of the unit are there and that its pixels are within the limits. */
export function readTiledImage(bytes: Uint8Array, unit: Unit): FitsImage {
  const { header, hdu } = unit
  const axes = axisLengths(header, hdu, 'Z')
  const coding = readCoding(header, hdu)
  const quantisation = readQuantisation(header, hdu)
  const scaling: Scaling = readScaling(header, hdu, coding.bitpix)
  const table = new TileTable(bytes, unit)
  const tile = axes.map((length, axis) => Math.min(length, tileLength(header, hdu, axis, axes)))
  const tilesAlong = axes.map((length, axis) => Math.ceil(length / tile[axis]))
  const tiles = tilesAlong.reduce((product, count) => product * count, 1)
  if (tiles !== table.rows) {
    throw new FitsError(
      'bad-header',
      `HDU ${hdu} is cut into ${tilesAlong.join(' x ')} tiles, but its table has ${table.rows} rows.`,
    )
  }
  const [width, height, ...cube] = axes
  const depth = cube.reduce((product, length) => product * length, 1)
  const planes = Array.from({ length: depth }, () => new Float32Array(width * height))
  for (let row = 0; row < tiles; row++) {
    const origin = originOf(row, tilesAlong, tile)
    const shape = axes.map((length, axis) => Math.min(tile[axis], length - origin[axis]))
    const stored = decodeTile(table, row, shape, coding, hdu)
    layTile(planes, axes, origin, shape, physicalValues(stored, table, row, coding.bitpix, quantisation, scaling, hdu))
  }
  return { hdu, extname: tiledName(header.EXTNAME), header: imageHeader(header), width, height, planes }
}

function readCoding(header: FitsHeader, hdu: number): TileCoding {
  const method = METHODS[String(header.ZCMPTYPE)]
  if (method === undefined) {
    throw new FitsError(
      'unsupported',
      `The tile compression ${header.ZCMPTYPE ?? 'without a name'} of HDU ${hdu} is not read; unpack the file with funpack first.`,
    )
  }
  const parameters = new Map<string, number>()
  for (let i = 1; header[`ZNAME${i}`] !== undefined; i++) {
    parameters.set(String(header[`ZNAME${i}`]).toUpperCase(), Number(header[`ZVAL${i}`] ?? NaN))
  }
  return { method, parameters, bitpix: bitsPerPixel(header, hdu, 'Z') }
}

function readQuantisation(header: FitsHeader, hdu: number): Quantisation {
  const method = String(header.ZQUANTIZ ?? 'NO_DITHER')
  if (!QUANTISATIONS.includes(method)) {
    throw new FitsError(
      'unsupported',
      `The quantisation ${method} of HDU ${hdu} is not read; unpack the file with funpack first.`,
    )
  }
  const dithered = method.startsWith('SUBTRACTIVE')
  const seed = dithered ? integerValue(header, 'ZDITHER0', hdu, 1) : 1
  if (seed < 1 || seed > 10000)
    throw new FitsError('bad-header', `HDU ${hdu} has ZDITHER0 = ${seed}; it must be 1 to 10000.`)
  return { dithered, exactZeros: method === 'SUBTRACTIVE_DITHER_2', seed }
}

/** ZTILEn; by default one row of the image is one tile (10.1.2). */
function tileLength(header: FitsHeader, hdu: number, axis: number, axes: number[]): number {
  const length = integerValue(header, `ZTILE${axis + 1}`, hdu, axis === 0 ? axes[0] : 1)
  if (length >= 1) return length
  throw new FitsError('bad-header', `HDU ${hdu} has ZTILE${axis + 1} = ${length}; a tile has at least one pixel.`)
}

/** First pixel of a tile along each axis; tiles count along axis 1 first. */
function originOf(row: number, tilesAlong: number[], tile: number[]): number[] {
  let rest = row
  return tilesAlong.map((count, axis) => {
    const index = rest % count
    rest = (rest - index) / count
    return index * tile[axis]
  })
}

function layTile(
  planes: Float32Array[],
  axes: number[],
  origin: number[],
  shape: number[],
  values: Float32Array,
): void {
  const planePixels = axes[0] * axes[1]
  const lines = values.length / shape[0]
  for (let line = 0; line < lines; line++) {
    let rest = line
    let start = origin[0]
    let stride = axes[0]
    for (let axis = 1; axis < axes.length; axis++) {
      const index = rest % shape[axis]
      rest = (rest - index) / shape[axis]
      start += (origin[axis] + index) * stride
      stride *= axes[axis]
    }
    planes[Math.floor(start / planePixels)].set(
      values.subarray(line * shape[0], (line + 1) * shape[0]),
      start % planePixels,
    )
  }
}

/** What the header was before compression (10.1.1): table and tile keywords gone, the Z keywords in their place. */
function imageHeader(header: FitsHeader): FitsHeader {
  const table =
    /^(XTENSION|BITPIX|NAXIS\d*|PCOUNT|GCOUNT|TFIELDS|THEAP|T(TYPE|FORM|UNIT|DIM|NULL|SCAL|ZERO|DISP)\d+|CHECKSUM|DATASUM)$/
  const tiles =
    /^Z(IMAGE|CMPTYPE|TILE\d+|NAME\d+|VAL\d+|QUANTIZ|DITHER0|BLANK|SCALE|ZERO|SIMPLE|EXTEND|TENSION|BITPIX|NAXIS\d*|PCOUNT|GCOUNT|HECKSUM|DATASUM)$/
  const kept: Record<string, FitsValue> = {}
  for (const [keyword, value] of Object.entries(header)) {
    if (/^Z(BITPIX|NAXIS\d*)$/.test(keyword)) kept[keyword.slice(1)] = value
    else if (!table.test(keyword) && !tiles.test(keyword)) kept[keyword] = value
  }
  return kept
}

function tiledName(value: FitsValue | undefined): string | null {
  return typeof value === 'string' && value !== '' && value !== 'COMPRESSED_IMAGE' ? value : null
}
