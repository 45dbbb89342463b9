import type { FitsHeader, FitsImage } from '@/lib/science/fits/fits-types'
import { writeFits } from '@/lib/science/fits/write-fits'
import { estimateNoise } from '@/lib/science/imaging/noise'
import { renderViews } from '@/lib/science/imaging/render-views'
import { PaintingError, paintLens, type PlaneToPaint } from '@/lib/science/lensing/painting/paint-lens'
import { turnPixels } from '@/lib/science/lensing/painting/turn-pixels'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { imageCentre } from '@/lib/science/sky/image-centre'
import type { SkyPosition } from '@/lib/science/sky/separation'
import { wcsCards } from '@/lib/science/sky/wcs-cards'
import type { Wcs } from '@/lib/science/sky/wcs'
import { planeOrientation } from './candidate-geometry'
import { encodePng } from './encode-png'
import type { Painted, PaintMade, PaintTask } from './paint-task'
import { openFits, readHeldPlane } from './read-cutout'
import type { HeldPlane } from './worker-tasks'

/** Of a preview, which is kept nowhere. */
const MOVED_ARCSEC = [40, 120] as const

/**
 * A candidate's cutouts made into a calibration stamp: turned or mirrored, so that nobody knows the galaxy again, then, unless it is
 * to be a known non-lens, painted on; moved on the sky, and written as FITS files of 32-bit floats. The same task gives the same
 * bytes. The header keeps the directions of the sky as they were: it is an invented place, and says nothing of the turn.
 */
export async function paintCandidate(task: PaintTask): Promise<PaintMade> {
  const read: PlaneToPaint[] = []
  for (const held of task.planes) {
    const plane = await readPlane(held, task.pixelScaleArcsec)
    if (plane === null) return { fault: `${held.file.name} can no longer be read on the server.` }
    read.push(plane)
  }
  if (read.length === 0) return { fault: 'It has no cutouts.' }
  const random = new SeededRandom(task.seed)
  const turned = chooseTurn(read, random)
  const moved = moveOnSky(read, task.position, random)
  const planes = moved.map((plane) => ({ ...plane, ...turnPixels(plane, turned) }))
  try {
    const painted = task.ranges === null ? null : paintLens(planes, task.ranges, random)
    const shown = planes.map((plane, k) => ({ ...plane, data: painted?.planes[k].data ?? plane.data }))
    return { ...written(shown, task), turned, truth: painted?.truth ?? null, views: viewsOf(shown, task) }
  } catch (error) {
    if (error instanceof PaintingError) return { fault: error.message }
    throw error
  }
}

async function readPlane(held: HeldPlane, pixelScaleArcsec: number | null): Promise<PlaneToPaint | null> {
  const cutout = await readHeldPlane(held)
  if (cutout === null) return null
  const { plane, data } = cutout
  const { band, width, height } = plane
  const wcs = plane.wcs === null ? null : (JSON.parse(plane.wcs) as Wcs)
  const scale = plane.pixelScaleArcsec ?? pixelScaleArcsec
  return { band, width, height, data, wcs, pixelScaleArcsec: scale, header: await headerOf(held) }
}

async function headerOf(held: HeldPlane): Promise<FitsHeader> {
  const fits = await openFits(held.file)
  if ('refusal' in fits) return {}
  const image: FitsImage | undefined = fits.images.find(({ hdu }) => hdu === held.hdu)
  return { ...fits.primary, ...image?.header }
}

/** Bands that do not lie on one grid would be torn apart by a turn; pictures that are not square keep their sides. */
function chooseTurn(planes: readonly PlaneToPaint[], random: SeededRandom): number {
  const turn = random.integer(1, 7)
  const [first] = planes
  const together = planes.every(({ width, height, wcs }) => {
    if (width !== first.width || height !== first.height || (wcs === null) !== (first.wcs === null)) return false
    if (wcs === null || first.wcs === null) return true
    return (
      JSON.stringify([wcs.matrix, wcs.referencePixel]) === JSON.stringify([first.wcs.matrix, first.wcs.referencePixel])
    )
  })
  if (!together) return 0
  return first.width === first.height ? turn : [2, 4, 6][turn % 3]
}

function moveOnSky(
  planes: readonly PlaneToPaint[],
  position: SkyPosition | null,
  random: SeededRandom,
): PlaneToPaint[] {
  const distance = random.between(...MOVED_ARCSEC) / 3600
  const direction = random.between(0, 2 * Math.PI)
  return planes.map((plane) => {
    if (plane.wcs === null) return plane
    const centre = imageCentre(plane.wcs, plane.width, plane.height)
    const [longitude, latitude] = plane.wcs.referencePoint
    if (position && centre) {
      const to = Math.max(-90, Math.min(90, latitude + position.decDeg - centre.decDeg))
      const around = longitude + position.raDeg - centre.raDeg
      return { ...plane, wcs: { ...plane.wcs, referencePoint: [((around % 360) + 360) % 360, to] as const } }
    }
    const [north, east] = [distance * Math.cos(direction), distance * Math.sin(direction)]
    // Towards the equator where the step would reach over the pole.
    const to = Math.abs(latitude + north) > 89.9 ? latitude - north : latitude + north
    const around = longitude + east / Math.max(0.01, Math.cos((to * Math.PI) / 180))
    return { ...plane, wcs: { ...plane.wcs, referencePoint: [((around % 360) + 360) % 360, to] as const } }
  })
}

/** Keywords that say what a unit of the pixels is; they hold for the new pixels too. */
const KEPT = ['BUNIT', 'GAIN', 'EGAIN', 'MAGZERO', 'MAGZPT', 'PHOTZP', 'ZPT', 'SEEING', 'PSF_FWHM'] as const

/** What a header can hold. */
const PRINTABLE = /^[\x20-\x7e]{1,60}$/

function written(planes: readonly PlaneToPaint[], { name }: PaintTask): Pick<Painted, 'files' | 'position'> {
  const centres = planes.map(({ wcs, width, height }) => (wcs ? imageCentre(wcs, width, height) : null))
  const position = centres.find((centre) => centre !== null) ?? null
  if (name === null) return { files: [], position }
  const files = planes.map(({ band, width, height, data, wcs, pixelScaleArcsec, header }) => {
    const kept = KEPT.flatMap((keyword) => (header[keyword] === undefined ? [] : { keyword, value: header[keyword] }))
    const cards = [
      ...(PRINTABLE.test(name) ? [{ keyword: 'OBJECT', value: name }] : []),
      ...(PRINTABLE.test(band) ? [{ keyword: 'FILTER', value: band }] : []),
      ...kept,
      ...(wcs ? wcsCards(wcs) : []),
    ]
    const sky = estimateNoise(data, width, height)
    const plane = {
      fileId: 0,
      band,
      hdu: 0,
      planeIndex: 0,
      width,
      height,
      wcs: wcs && JSON.stringify({ ...wcs, size: [width, height] }),
      pixelScaleArcsec,
      background: sky.background,
      noise: sky.sigma,
    }
    return { band, plane, bytes: writeFits([{ header: cards, width, height, data }]) }
  })
  return { files, position }
}

function viewsOf(planes: readonly PlaneToPaint[], { recipe }: PaintTask): Painted['views'] {
  if (recipe === null) return []
  const drawn = planes.map(({ band, width, height, data, wcs, pixelScaleArcsec }) => ({
    band,
    width,
    height,
    data,
    pixelScaleArcsec,
    orientation: planeOrientation(wcs && JSON.stringify(wcs)),
  }))
  return renderViews(drawn, recipe).map((view) => ({
    key: view.key,
    width: view.width,
    height: view.height,
    note: view.note,
    png: encodePng(view),
  }))
}
