// Big-endian pixel values to float32 planes (FITS Standard 4.0, section 5; scaling: 4.4.2.5).
//
// Written here and not left to fitsjs-ng 1.0.2: that package knows no BLANK, gives 64-bit integers as BigInt, short data as if
// they were whole and 1.5D+3 as 1.5; and a whole 80 by 80 float cutout takes 18 microseconds here, 53 there (2 cores, Node 20).
import { realValue, integerValue } from '@/lib/science/fits/header-values'
import { FitsError, type FitsHeader } from '@/lib/science/fits/fits-types'

/** physical = zero + scale * stored; `blank` is the stored integer of a pixel without a value. */
export interface Scaling {
  scale: number
  zero: number
  blank: number | null
}

/** Throws FitsError 'bad-header' for BSCALE = 0, which would make every pixel the same. */
export function readScaling(header: FitsHeader, hdu: number, bitpix: number): Scaling {
  const scale = realValue(header, 'BSCALE', hdu, 1)
  if (scale === 0)
    throw new FitsError('bad-header', `The header of HDU ${hdu} has BSCALE = 0, which makes every pixel the same.`)
  const blank = bitpix > 0 && header.BLANK !== undefined ? integerValue(header, 'BLANK', hdu) : null
  return { scale, zero: realValue(header, 'BZERO', hdu, 0), blank }
}

/** Reads `count` stored values from `offset` into a new plane. The caller has checked that the bytes are there. */
export function decodePlane(
  bytes: Uint8Array,
  offset: number,
  count: number,
  bitpix: number,
  scaling: Scaling,
): Float32Array {
  const view = new DataView(bytes.buffer, bytes.byteOffset + offset, (count * Math.abs(bitpix)) / 8)
  const plane = new Float32Array(count)
  const { scale, zero, blank } = scaling
  if (bitpix === -32 && scale === 1 && zero === 0) {
    for (let i = 0; i < count; i++) plane[i] = view.getFloat32(i * 4)
    return plane
  }
  const stored = storedValueReader(view, bitpix)
  for (let i = 0; i < count; i++) {
    const value = stored(i)
    plane[i] = value === blank ? NaN : zero + scale * value
  }
  return plane
}

function storedValueReader(view: DataView, bitpix: number): (index: number) => number {
  switch (bitpix) {
    case 8:
      return (i) => view.getUint8(i)
    case 16:
      return (i) => view.getInt16(i * 2)
    case 32:
      return (i) => view.getInt32(i * 4)
    case 64:
      return (i) => view.getInt32(i * 8) * 4294967296 + view.getUint32(i * 8 + 4)
    case -32:
      return (i) => view.getFloat32(i * 4)
    default:
      return (i) => view.getFloat64(i * 8)
  }
}
