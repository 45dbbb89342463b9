// The header and data units of a file, found and measured before anything is decoded (FITS Standard 4.0, sections 3 and 4.4).
import { axisLengths, bitsPerPixel, integerValue } from '@/lib/science/fits/header-values'
import { FitsError, type FitsHeader } from '@/lib/science/fits/fits-types'
import { BLOCK_BYTES, readHeader } from '@/lib/science/fits/read-header'
import { refuseForeignFormat } from '@/lib/science/fits/foreign-format'

/** Common practice, no source: a camera of a hundred chips with weights and masks has 300. */
const MOST_UNITS = 1024

export interface Unit {
  hdu: number
  header: FitsHeader
  axes: number[]
  bitpix: number
  /** 'random-groups' is a radio visibility format (section 6), not a picture. */
  kind: 'image' | 'tiles' | 'table' | 'random-groups' | 'other'
  dataStart: number
  /** Without the padding to a whole block. */
  dataBytes: number
}

/** A unit as its header promises it, whether or not its data are there. */
export function unitAt(bytes: Uint8Array, start: number, hdu: number): Unit {
  const read = readHeader(bytes, start, hdu)
  if (read === null) {
    throw new FitsError(
      'truncated-header',
      `The header of HDU ${hdu} has no END card in the ${bytes.length - start} bytes from byte ${start} on: the file is cut off.`,
    )
  }
  const { header, dataStart } = read
  if (hdu === 0 && header.SIMPLE !== true) {
    throw new FitsError(
      'bad-header',
      'The file says SIMPLE = F: it does not follow the FITS standard, so its pixels cannot be trusted.',
    )
  }
  const bitpix = bitsPerPixel(header, hdu)
  const axes = axisLengths(header, hdu)
  const kind = kindOf(header, axes, hdu)
  return { hdu, header, axes, bitpix, kind, dataStart, dataBytes: dataBytes(header, axes, bitpix, hdu, kind) }
}

function kindOf(header: FitsHeader, axes: number[], hdu: number): Unit['kind'] {
  if (header.GROUPS === true && axes[0] === 0 && axes.length > 1) return 'random-groups'
  if (hdu === 0 || header.XTENSION === 'IMAGE') return 'image'
  if (header.XTENSION === 'BINTABLE') return header.ZIMAGE === true ? 'tiles' : 'table'
  return header.XTENSION === 'TABLE' ? 'table' : 'other'
}

/** |BITPIX| / 8 * GCOUNT * (PCOUNT + NAXIS1 * ... * NAXISm), equations 1 and 2 of the standard. */
function dataBytes(header: FitsHeader, axes: number[], bitpix: number, hdu: number, kind: Unit['kind']): number {
  if (axes.length === 0) return 0
  const elements = (kind === 'random-groups' ? axes.slice(1) : axes).reduce((product, length) => product * length, 1)
  const groups = integerValue(header, 'GCOUNT', hdu, 1)
  const parameters = integerValue(header, 'PCOUNT', hdu, 0)
  const wrong =
    kind === 'image'
      ? parameters !== 0 || groups !== 1
      : parameters < 0 || groups < 0 || (kind === 'tiles' && groups !== 1)
  if (wrong) {
    const rule =
      kind === 'image' ? 'an image has PCOUNT 0 and GCOUNT 1' : 'a table has GCOUNT 1 and PCOUNT of 0 or more'
    throw new FitsError(
      'bad-header',
      `The header of HDU ${hdu} has PCOUNT = ${parameters} and GCOUNT = ${groups}; ${rule}.`,
    )
  }
  return (Math.abs(bitpix) / 8) * groups * (parameters + elements)
}

/** All units, in file order. `check` sees each one before its size is compared with the bytes present. */
export function findUnits(bytes: Uint8Array, check: (unit: Unit) => void): Unit[] {
  refuseForeignFormat(bytes)
  const units: Unit[] = []
  let start = 0
  do {
    if (units.length === MOST_UNITS)
      throw new FitsError('too-large', `The file has more than the ${MOST_UNITS} HDUs that are allowed for one file.`)
    const unit = unitAt(bytes, start, units.length)
    check(unit)
    const present = Math.max(0, bytes.length - unit.dataStart)
    if (unit.dataBytes > present) {
      throw new FitsError(
        'truncated-data',
        `The header of HDU ${unit.hdu} promises ${promised(unit)} = ${unit.dataBytes} bytes of data, but only ${present} are present: the file is cut off.`,
      )
    }
    units.push(unit)
    start = unitEnd(unit)
  } while (beginsExtension(bytes, start))
  return units
}

/** Where the next unit begins, if there is one. */
export const unitEnd = ({ dataStart, dataBytes }: Unit): number =>
  dataStart + Math.ceil(dataBytes / BLOCK_BYTES) * BLOCK_BYTES

function promised(unit: Unit): string {
  return `${unit.axes.join(' x ')} values of ${Math.abs(unit.bitpix)} bits`
}

/** Anything else after the last unit is special records or padding, which section 3.5 lets a reader pass over. */
export function beginsExtension(bytes: Uint8Array, start: number): boolean {
  const word = 'XTENSION'
  return (
    start + word.length <= bytes.length &&
    [...word].every((letter, index) => bytes[start + index] === letter.charCodeAt(0))
  )
}
