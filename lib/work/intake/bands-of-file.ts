import type { FitsFile, FitsImage } from '@/lib/science/fits/fits-types'
import { bandOfFilter, bandOfHeader, bandsOfCube } from './band-of-header'
import { noBand, type Refusal } from './refusals'

/** Where in a file the pixels of one band are. */
export interface BandPlace {
  band: string
  image: FitsImage
  planeIndex: number
}

export type BandPlaces = { places: BandPlace[]; notes: string[] } | { refusal: Refusal }

/** Images beside the science image: weights, errors, masks, models. Names as HST, DES, HSC and DECaLS write them. */
const BESIDE =
  /(^|[^a-z])(wht|weight|weights|err|error|sigma|var|variance|ivar|invvar|mask|msk|dq|flag|flags|psf|rms|bkg|background|sky|model|resid|residual|exp|exptime|nexp|cov)([^a-z]|$)/i

const isScience = (image: FitsImage): boolean => image.extname === null || !BESIDE.test(image.extname)

/**
 * Which pixels of a file are which band. `told` is the band that the manifest or the file name gave: then the file must hold
 * one science image. Otherwise several extensions are told apart by EXTNAME, then by their own filter keyword, else by the
 * campaign's order when the counts agree; the planes of a cube by BANDS or FILTERn, else by that order; one image by its
 * filter keyword (the primary header's where its own has none).
 */
export function bandsOfFile(file: FitsFile, told: string | null, bands: readonly string[], name: string): BandPlaces {
  const science = file.images.filter(isScience)
  const images = science.length > 0 ? science : file.images
  if (told !== null) return toldBand(images, told, bands)
  if (images.length > 1) return severalImages(images, bands, name)
  return images[0].planes.length > 1 ? cube(images[0], bands) : oneImage(file, images[0], bands, name)
}

function toldBand(images: FitsImage[], band: string, bands: readonly string[]): BandPlaces {
  const own = images.find((image) => image.extname !== null && bandOfFilter(image.extname, bands) === band)
  const image = own ?? images[0]
  if (image.planes.length > 1) {
    return {
      refusal: noBand(
        `The name or the manifest says band ${band}, but the file holds a cube of ${image.planes.length} planes, and which of them is meant is not told.`,
        bands,
      ),
    }
  }
  const left = images.length - 1
  const notes =
    left > 0
      ? [`${left} more ${left === 1 ? 'image' : 'images'} in this file ${left === 1 ? 'is' : 'are'} not used.`]
      : []
  return { places: [{ band, image, planeIndex: 0 }], notes }
}

function oneImage(file: FitsFile, image: FitsImage, bands: readonly string[], name: string): BandPlaces {
  const own = bandOfHeader(image.header, bands)
  const inherited = own.band === null ? bandOfHeader(file.primary, bands) : own
  const byExtension = image.extname === null ? null : bandOfFilter(image.extname, bands)
  const only = bands.length === 1 && own.said.length + inherited.said.length === 0 ? bands[0] : null
  const band = own.band ?? inherited.band ?? byExtension ?? only
  if (band !== null) return { places: [{ band, image, planeIndex: 0 }], notes: [] }
  const said = [...new Set([...own.said, ...inherited.said])]
  const header =
    said.length > 0 ? `the header has ${said.join(', ')}, which is none of them` : 'the header has no FILTER or BAND'
  return { refusal: noBand(`The band of '${name}' is not known: its name tells none, and ${header}.`, bands) }
}

function cube(image: FitsImage, bands: readonly string[]): BandPlaces {
  const count = image.planes.length
  const order = bandsOfCube(image.header, count, bands) ?? (count === bands.length ? bands : null)
  if (order) return { places: order.map((band, planeIndex) => ({ band, image, planeIndex })), notes: [] }
  return {
    refusal: noBand(
      `The cube has ${count} planes, which is not one for each band, and no BANDS or FILTER1 … FILTER${count} keyword names them.`,
      bands,
    ),
  }
}

function severalImages(images: FitsImage[], bands: readonly string[], name: string): BandPlaces {
  const places: BandPlace[] = []
  const notes: string[] = []
  for (const image of images) {
    const byName = image.extname === null ? null : bandOfFilter(image.extname, bands)
    const band = byName ?? bandOfHeader(image.header, bands).band
    const called = image.extname ?? `HDU ${image.hdu}`
    if (band === null || image.planes.length > 1) notes.push(`${called} names no band and is not used.`)
    else if (places.some((place) => place.band === band))
      notes.push(`${called} is a second image of band ${band} and is not used.`)
    else places.push({ band, image, planeIndex: 0 })
  }
  if (places.length > 0) return { places, notes }
  if (images.length === bands.length && images.every((image) => image.planes.length === 1)) {
    return { places: images.map((image, index) => ({ band: bands[index], image, planeIndex: 0 })), notes: [] }
  }
  return {
    refusal: noBand(
      `'${name}' holds ${images.length} images, and neither EXTNAME nor FILTER of any names a band of this campaign.`,
      bands,
    ),
  }
}
