// Images to a standard FITS file of 32-bit floats (FITS Standard 4.0). Structural keywords are written here and may not be given.
import { writeCard, type FitsCard } from '@/lib/science/fits/write-card'

export interface ImageToWrite {
  /** In the order to be written, without SIMPLE, XTENSION, BITPIX, NAXIS..., PCOUNT, GCOUNT, EXTEND, EXTNAME, BSCALE, BZERO, END. */
  header: readonly FitsCard[]
  width: number
  height: number
  /** width * height values, row 0 the bottom row; NaN is a pixel without a value. */
  data: Float32Array
  extname?: string
}

export interface WriteFitsOptions {
  /** Of several images: an extension each (the default), or one cube with the first image's header. */
  several?: 'extensions' | 'cube'
}

const BLOCK_BYTES = 2880
const STRUCTURAL = /^(SIMPLE|XTENSION|BITPIX|NAXIS\d*|PCOUNT|GCOUNT|EXTEND|EXTNAME|BSCALE|BZERO|BLANK|END)$/

/**
 * One image becomes the primary image. Several become image extensions behind an empty primary, or the planes of one cube.
 * @throws RangeError for no image, a size that does not match its data, cube planes of different sizes, or a card that FITS
 * cannot hold.
 */
export function writeFits(
  images: readonly ImageToWrite[],
  { several = 'extensions' }: WriteFitsOptions = {},
): Uint8Array {
  if (images.length === 0) throw new RangeError('A FITS file needs at least one image.')
  images.forEach(refuseBadSize)
  const [first] = images
  if (images.length === 1) {
    return join([
      headerBlock([...start('SIMPLE'), ...axes([first.width, first.height]), ...own(first)]),
      dataBlock([first.data]),
    ])
  }
  if (several === 'cube') {
    if (images.some(({ width, height }) => width !== first.width || height !== first.height)) {
      throw new RangeError('The planes of a cube must all have the same width and height.')
    }
    const cards = [...start('SIMPLE'), ...axes([first.width, first.height, images.length]), ...own(first)]
    return join([headerBlock(cards), dataBlock(images.map(({ data }) => data))])
  }
  const primary = headerBlock([
    { keyword: 'SIMPLE', value: true, comment: 'conforms to the FITS standard' },
    { keyword: 'BITPIX', value: 8 },
    { keyword: 'NAXIS', value: 0, comment: 'no image here, see the extensions' },
    { keyword: 'EXTEND', value: true },
  ])
  const extensions = images.flatMap((image) => [
    headerBlock([
      ...start('XTENSION'),
      ...axes([image.width, image.height]),
      { keyword: 'PCOUNT', value: 0 },
      { keyword: 'GCOUNT', value: 1 },
      ...own(image),
    ]),
    dataBlock([image.data]),
  ])
  return join([primary, ...extensions])
}

function refuseBadSize({ width, height, data }: ImageToWrite): void {
  const whole = Number.isInteger(width) && Number.isInteger(height) && width > 0 && height > 0
  if (whole && data.length === width * height) return
  throw new RangeError(`An image of ${width} x ${height} pixels needs as many values, and its data has ${data.length}.`)
}

function start(kind: 'SIMPLE' | 'XTENSION'): FitsCard[] {
  const first: FitsCard =
    kind === 'SIMPLE'
      ? { keyword: 'SIMPLE', value: true, comment: 'conforms to the FITS standard' }
      : { keyword: 'XTENSION', value: 'IMAGE', comment: 'image extension' }
  return [first, { keyword: 'BITPIX', value: -32, comment: '32-bit floating point' }]
}

function axes(lengths: number[]): FitsCard[] {
  return [
    { keyword: 'NAXIS', value: lengths.length },
    ...lengths.map((value, i) => ({ keyword: `NAXIS${i + 1}`, value })),
  ]
}

function own({ header, extname }: ImageToWrite): FitsCard[] {
  const forbidden = header.find(({ keyword }) => STRUCTURAL.test(keyword))
  if (forbidden) throw new RangeError(`${forbidden.keyword} is written by the FITS writer itself and cannot be given.`)
  return extname === undefined ? [...header] : [{ keyword: 'EXTNAME', value: extname }, ...header]
}

function headerBlock(cards: readonly FitsCard[]): Uint8Array {
  const text = cards.map(writeCard).join('') + 'END'.padEnd(80)
  return new TextEncoder().encode(text.padEnd(wholeBlocks(text.length)))
}

function dataBlock(planes: readonly Float32Array[]): Uint8Array {
  const bytes = new Uint8Array(wholeBlocks(planes.reduce((sum, plane) => sum + plane.length * 4, 0)))
  const view = new DataView(bytes.buffer)
  let at = 0
  for (const plane of planes) {
    for (let i = 0; i < plane.length; i++, at += 4) view.setFloat32(at, plane[i])
  }
  return bytes
}

function wholeBlocks(length: number): number {
  return Math.ceil(length / BLOCK_BYTES) * BLOCK_BYTES
}

function join(parts: readonly Uint8Array[]): Uint8Array {
  const whole = new Uint8Array(parts.reduce((sum, part) => sum + part.length, 0))
  let at = 0
  for (const part of parts) {
    whole.set(part, at)
    at += part.length
  }
  return whole
}
