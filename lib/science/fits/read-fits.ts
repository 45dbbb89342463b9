// A FITS file to images. Everything that the headers promise is compared with the limits and with the bytes present before a
// pixel is decoded or an array made, so that a damaged or hostile file costs no more than its own size.
import { decodePlane, readScaling } from '@/lib/science/fits/decode-array'
import {
  DEFAULT_FITS_LIMITS,
  FitsError,
  type FitsFile,
  type FitsImage,
  type FitsLimits,
} from '@/lib/science/fits/fits-types'
import { findUnits, type Unit } from '@/lib/science/fits/find-units'
import { gunzipSmall, isGzip } from '@/lib/science/fits/gunzip'
import { gunzipStepwise } from '@/lib/science/fits/gunzip-stepwise'
import { axisLengths } from '@/lib/science/fits/header-values'
import { readTiledImage } from '@/lib/science/fits/tiles/read-tiled-image'

/** Common practice, no source: a cube of bands has fewer than ten. */
const MAX_PLANES = 1024

/**
 * Reads every image of two or more axes, plain or tile-compressed, of a FITS file that may be gzip-compressed as a whole
 * (told by its first bytes). Rejects with FitsError and with nothing else; the bytes are not changed.
 */
export async function readFits(bytes: Uint8Array, limits: FitsLimits = DEFAULT_FITS_LIMITS): Promise<FitsFile> {
  const plain = isGzip(bytes) ? await unpack(bytes, limits) : bytes
  if (plain.length > limits.maxBytes) {
    throw new FitsError(
      'too-large',
      `The file has ${plain.length} bytes; at most ${limits.maxBytes} are allowed for one file.`,
    )
  }
  const units = findUnits(plain, pixelGuard(limits))
  const images: FitsImage[] = []
  for (const unit of units) {
    if (pixelCount(unit) > 0)
      images.push(unit.kind === 'tiles' ? readTiledImage(plain, unit) : readPlainImage(plain, unit))
  }
  if (images.length === 0)
    throw new FitsError('no-image', `The file holds no two-dimensional image: ${whatThereIs(units)}.`)
  return { primary: units[0].header, images }
}

/** Nearly every cutout is smaller than this, and unpacked in one go; a larger file is looked at while it is unpacked. */
const SMALL_BYTES = 4 * 1024 * 1024

async function unpack(bytes: Uint8Array, limits: FitsLimits): Promise<Uint8Array> {
  const small = gunzipSmall(bytes, Math.min(SMALL_BYTES, limits.maxBytes))
  return small ?? gunzipStepwise(bytes, limits.maxBytes, pixelGuard(limits))
}

/** Refuses the unit with which the pixels of a file become too many. */
function pixelGuard(limits: FitsLimits): (unit: Unit) => void {
  let pixels = 0
  return (unit) => {
    pixels += pixelCount(unit)
    refuseTooManyPixels(unit, pixels, limits)
  }
}

/** Pixels that would be handed over: none of tables and of arrays with fewer than two axes. */
function pixelCount(unit: Unit): number {
  if (unit.kind !== 'image' && unit.kind !== 'tiles') return 0
  const axes = imageAxes(unit)
  return axes.length < 2 ? 0 : axes.reduce((product, length) => product * length, 1)
}

function imageAxes(unit: Unit): number[] {
  return unit.kind === 'tiles' ? axisLengths(unit.header, unit.hdu, 'Z') : unit.axes
}

/** `pixels` counts this unit and those before it. A cube of very many tiny planes costs more memory than its pixels. */
function refuseTooManyPixels(unit: Unit, pixels: number, limits: FitsLimits): void {
  const planes =
    pixelCount(unit) > 0
      ? imageAxes(unit)
          .slice(2)
          .reduce((product, length) => product * length, 1)
      : 0
  if (planes > MAX_PLANES) {
    throw new FitsError(
      'too-large',
      `The cube in HDU ${unit.hdu} has ${planes} planes; at most ${MAX_PLANES} are allowed.`,
    )
  }
  if (pixels <= limits.maxPixels) return
  throw new FitsError(
    'too-large',
    `The image in HDU ${unit.hdu} has ${imageAxes(unit).join(' x ')} pixels; at most ${limits.maxPixels} are allowed for one file.`,
  )
}

function readPlainImage(bytes: Uint8Array, unit: Unit): FitsImage {
  const { hdu, header, bitpix, dataStart } = unit
  const [width, height, ...cube] = unit.axes
  const scaling = readScaling(header, hdu, bitpix)
  const planeBytes = (width * height * Math.abs(bitpix)) / 8
  const depth = cube.reduce((product, length) => product * length, 1)
  const planes = Array.from({ length: depth }, (_, k) =>
    decodePlane(bytes, dataStart + k * planeBytes, width * height, bitpix, scaling),
  )
  return { hdu, extname: extensionName(header.EXTNAME), header, width, height, planes }
}

function extensionName(value: unknown): string | null {
  return typeof value === 'string' && value !== '' ? value : null
}

function whatThereIs(units: readonly Unit[]): string {
  const described = units.slice(0, 5).map((unit) => {
    if (unit.kind === 'table') return `HDU ${unit.hdu} is a table`
    if (unit.kind === 'random-groups') return `HDU ${unit.hdu} holds random groups`
    const axes = unit.kind === 'other' ? [] : imageAxes(unit)
    if (axes.length === 0) return `HDU ${unit.hdu} is empty (NAXIS = 0)`
    if (axes.length === 1) return `HDU ${unit.hdu} is one-dimensional (NAXIS = 1)`
    return `HDU ${unit.hdu} has no pixels (${axes.join(' x ')})`
  })
  return described.join(', ') + (units.length > 5 ? ` and ${units.length - 5} more` : '')
}
