import { createHash } from 'node:crypto'
import { readFileSync } from 'node:fs'
import { FitsError, type FitsFile, type FitsImage } from '@/lib/science/fits/fits-types'
import { readFits } from '@/lib/science/fits/read-fits'
import type { BandPlane } from '@/lib/science/imaging/normalise-planes'
import { withoutFill } from '@/lib/science/imaging/without-fill'
import { estimateNoise, type Noise } from '@/lib/science/imaging/noise'
import { imageCentre } from '@/lib/science/sky/image-centre'
import type { SkyPosition } from '@/lib/science/sky/separation'
import { pixelScaleArcsec, readWcs, WcsError, type Wcs } from '@/lib/science/sky/wcs'
import { bandsOfFile, type BandPlace } from '@/lib/work/intake/bands-of-file'
import { LOST, type Refusal } from '@/lib/work/intake/refusals'
import { planeOrientation } from './candidate-geometry'
import type { FileToRead, HeldPlane, PlaneRead, StoredFile } from './worker-tasks'

/** One band's pixels with what is known of them. */
export interface Cutout {
  plane: PlaneRead
  data: Float32Array
  sky: Noise
  centre: SkyPosition | null
  /** Why there is no position although the header seems to have one. */
  wcsFault: string | null
}

export type CutoutsRead = { cutouts: Cutout[]; notes: string[] } | { refusal: Refusal }

/** The file's images, or the refusal that says why not. Bytes that are not those that were delivered are never shown. */
export async function openFits(file: StoredFile): Promise<FitsFile | { refusal: Refusal }> {
  let bytes: Uint8Array
  try {
    bytes = readFileSync(file.path)
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ENOENT') return { refusal: LOST }
    throw error
  }
  if (createHash('sha256').update(bytes).digest('hex') !== file.sha256) return { refusal: LOST }
  try {
    return await readFits(bytes)
  } catch (error) {
    if (error instanceof FitsError) return { refusal: { fault: error.fault, reason: error.message } }
    throw error
  }
}

export async function readCutouts(file: FileToRead, bands: readonly string[]): Promise<CutoutsRead> {
  const fits = await openFits(file)
  if ('refusal' in fits) return fits
  const found = bandsOfFile(fits, file.band, bands, file.name)
  if ('refusal' in found) return found
  return { cutouts: found.places.map((place) => cutoutOf(file.id, place, fits)), notes: found.notes }
}

function cutoutOf(fileId: number, { band, image, planeIndex }: BandPlace, fits: FitsFile): Cutout {
  const { width, height, hdu } = image
  const data = withoutFill(image.planes[planeIndex], width, height)
  const sky = estimateNoise(data, width, height)
  const { wcs, fault } = wcsOf(image, fits)
  const scale = wcs === null ? null : Math.sqrt(pixelScaleArcsec(wcs)[0] * pixelScaleArcsec(wcs)[1])
  return {
    plane: {
      fileId,
      band,
      hdu,
      planeIndex,
      width,
      height,
      wcs: wcs === null ? null : JSON.stringify(wcs),
      pixelScaleArcsec: scale !== null && Number.isFinite(scale) && scale > 0 ? scale : null,
      background: sky.background,
      noise: sky.sigma,
    },
    data,
    sky,
    centre: wcs === null ? null : imageCentre(wcs, width, height),
    wcsFault: fault,
  }
}

/** An extension without a WCS of its own takes the primary header's (INHERIT is seldom written, so it is not asked for). */
function wcsOf(image: FitsImage, fits: FitsFile): { wcs: Wcs | null; fault: string | null } {
  try {
    const own = readWcs(image.header)
    return { wcs: own ?? (image.hdu > 0 ? readWcs(fits.primary) : null), fault: null }
  } catch (error) {
    if (error instanceof WcsError) return { wcs: null, fault: error.message }
    throw error
  }
}

/** As pictures are made of it, the stored ones and those drawn live. */
export const bandPlane = ({ plane, data, sky }: Cutout): BandPlane => ({
  band: plane.band,
  width: plane.width,
  height: plane.height,
  data,
  pixelScaleArcsec: plane.pixelScaleArcsec,
  orientation: planeOrientation(plane.wcs),
  sky,
})

/** Pixels of a plane that was read before; null when its file can no longer be read or has changed its shape. */
export async function readHeldPlane(held: HeldPlane): Promise<Cutout | null> {
  const fits = await openFits(held.file)
  if ('refusal' in fits) return null
  const image = fits.images.find(({ hdu }) => hdu === held.hdu)
  if (!image?.planes[held.planeIndex]) return null
  return cutoutOf(held.file.id, { band: held.band, image, planeIndex: held.planeIndex }, fits)
}
