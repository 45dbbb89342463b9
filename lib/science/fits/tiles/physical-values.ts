// Stored numbers of a tile to physical ones (FITS Standard 4.0, 10.2): quantised reals by ZSCALE and ZZERO, with or without
// dithering; then BSCALE and BZERO as for any image; blank pixels NaN.
import type { Scaling } from '@/lib/science/fits/decode-array'
import { FitsError } from '@/lib/science/fits/fits-types'
import type { StoredTile } from '@/lib/science/fits/tiles/decode-tile'
import { ditherOfTile } from '@/lib/science/fits/tiles/dither'
import type { TileTable } from '@/lib/science/fits/tiles/tile-table'

export interface Quantisation {
  dithered: boolean
  /** SUBTRACTIVE_DITHER_2: the integer EXACT_ZERO stands for 0. */
  exactZeros: boolean
  /** ZDITHER0, 1 to 10000. */
  seed: number
}

/** Table 39 and section 10.2.2 of the standard. */
const EXACT_ZERO = -2147483646

export function physicalValues(
  tile: StoredTile,
  table: TileTable,
  row: number,
  bitpix: number,
  quantisation: Quantisation,
  scaling: Scaling,
  hdu: number,
): Float32Array {
  const { values } = tile
  const pixels = new Float32Array(values.length)
  const { scale, zero } = scaling
  if (!tile.quantised) {
    const blank = bitpix > 0 ? (table.number('ZBLANK', row) ?? scaling.blank) : null
    for (let i = 0; i < values.length; i++) pixels[i] = values[i] === blank ? NaN : zero + scale * values[i]
    return pixels
  }
  const blank = table.number('ZBLANK', row)
  const step = table.number('ZSCALE', row)
  const base = table.number('ZZERO', row)
  if (step === null || base === null || !Number.isFinite(step) || !Number.isFinite(base)) {
    throw new FitsError(
      'corrupt-compression',
      `Tile ${row + 1} of HDU ${hdu} has ZSCALE = ${step} and ZZERO = ${base}; both must be numbers.`,
    )
  }
  const random = quantisation.dithered ? ditherOfTile(row, quantisation.seed) : null
  for (let i = 0; i < values.length; i++) {
    const stored = values[i]
    const shift = random === null ? 0 : 0.5 - random()
    const quantised = quantisation.exactZeros && stored === EXACT_ZERO ? 0 : (stored + shift) * step + base
    pixels[i] = stored === blank ? NaN : zero + scale * quantised
  }
  return pixels
}
