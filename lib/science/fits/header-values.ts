// Required values out of a header, each with a refusal that names keyword and value.
import { FitsError, type FitsHeader } from '@/lib/science/fits/fits-types'

/** An integer keyword; `fallback` where it may be absent. Throws FitsError 'bad-header'. */
export function integerValue(header: FitsHeader, keyword: string, hdu: number, fallback?: number): number {
  const value = header[keyword]
  if (value === undefined && fallback !== undefined) return fallback
  if (value === undefined)
    throw new FitsError('bad-header', `The header of HDU ${hdu} has no ${keyword}, which it must have.`)
  if (typeof value === 'number' && Number.isInteger(value)) return value
  throw new FitsError(
    'bad-header',
    `The header of HDU ${hdu} has ${keyword} = ${shown(value)}, which must be a whole number.`,
  )
}

/** A real keyword with its standard default. Throws FitsError 'bad-header'. */
export function realValue(header: FitsHeader, keyword: string, hdu: number, fallback: number): number {
  const value = header[keyword] ?? fallback
  if (typeof value === 'number') return value
  throw new FitsError(
    'bad-header',
    `The header of HDU ${hdu} has ${keyword} = ${shown(value)}, which must be a number.`,
  )
}

/** NAXISn (or ZNAXISn) of an array: FITS Standard 4.0, 4.4.1.1: 0 to 999 axes, none negative. */
export function axisLengths(header: FitsHeader, hdu: number, prefix: '' | 'Z' = ''): number[] {
  const count = integerValue(header, `${prefix}NAXIS`, hdu)
  if (count < 0 || count > 999) {
    throw new FitsError(
      'bad-header',
      `The header of HDU ${hdu} has ${prefix}NAXIS = ${count}; the standard allows 0 to 999.`,
    )
  }
  return Array.from({ length: count }, (_, axis) => {
    const keyword = `${prefix}NAXIS${axis + 1}`
    const length = integerValue(header, keyword, hdu)
    if (length >= 0) return length
    throw new FitsError(
      'bad-header',
      `The header of HDU ${hdu} has ${keyword} = ${length}; a length cannot be negative.`,
    )
  })
}

/** BITPIX (or ZBITPIX): FITS Standard 4.0, table 8. */
export function bitsPerPixel(header: FitsHeader, hdu: number, prefix: '' | 'Z' = ''): number {
  const bitpix = integerValue(header, `${prefix}BITPIX`, hdu)
  if ([8, 16, 32, 64, -32, -64].includes(bitpix)) return bitpix
  throw new FitsError(
    'bad-header',
    `The header of HDU ${hdu} has ${prefix}BITPIX = ${bitpix}; it must be 8, 16, 32, 64, -32 or -64.`,
  )
}

function shown(value: unknown): string {
  return typeof value === 'string'
    ? `'${value.slice(0, 40)}'`
    : value === true
      ? 'T'
      : value === false
        ? 'F'
        : String(value)
}
