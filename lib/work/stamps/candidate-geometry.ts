import type { PlaneGeometry } from '@/db/queries/stamps'
import type { PlaneOrientation } from '@/lib/science/imaging/normalise-planes'
import { shownOrientation } from '@/lib/science/imaging/orient-planes'
import { bandOfView } from '@/lib/science/imaging/recipe'
import type { StampGeometry } from '@/lib/science/imaging/stamp-geometry'
import { orientation, type Wcs } from '@/lib/science/sky/wcs'

export const UNKNOWN_GEOMETRY: StampGeometry = { pixelScaleArcsec: null, northAngleDeg: null, eastLeft: true }

/** Two pixel scales are the same when they differ by less than this share: a bar of 5 arcsec stays right to the eye. */
const SAME_SCALE = 0.01

/** What the geometry of a plane is told from, without its pixels. */
export type PlaneFacts = Pick<
  PlaneGeometry,
  'band' | 'width' | 'height' | 'wcs' | 'pixelScaleArcsec' | 'candidateScaleArcsec'
>

/** How a plane lies on the sky by its WCS (JSON); null where that is missing or does not say. */
export function planeOrientation(wcs: string | null): PlaneOrientation | null {
  if (wcs === null) return null
  const { northAngleDeg, eastLeft } = orientation(JSON.parse(wcs) as Wcs)
  return Number.isFinite(northAngleDeg) ? { northAngleDeg, eastLeft } : null
}

/**
 * One scale and one compass for all views of a candidate. A manifest's scale wins. Where the bands differ in scale no bar is
 * drawn, as it would be wrong in one of them; viewGeometry knows each view's. The compass is that of the first band that has
 * a WCS, or north up where the pictures are turned so.
 * @param planes of one candidate, in the order of the campaign's bands.
 */
export function candidateGeometry(planes: readonly PlaneFacts[], northUp = false): StampGeometry {
  const scales = planes.flatMap((plane) => plane.pixelScaleArcsec ?? [])
  const pixelScaleArcsec = agree(scales) ? (planes[0]?.candidateScaleArcsec ?? scales[0] ?? null) : null
  const lies = shownOrientation(
    planes.map((plane) => planeOrientation(plane.wcs)),
    northUp,
  )
  return lies ? { pixelScaleArcsec, ...lies } : { ...UNKNOWN_GEOMETRY, pixelScaleArcsec }
}

/**
 * Scale and compass of one view. Bands of different scales are combined on the grid of the finest (match-scales.ts); a band's
 * own view stays as it came. A view whose scale cannot be told has none, and so no bar.
 */
export function viewGeometry(
  planes: readonly PlaneFacts[],
  view: { key: string; width: number; height: number },
  northUp: boolean,
): StampGeometry {
  const all = candidateGeometry(planes, northUp)
  const told = planes.filter((plane) => plane.pixelScaleArcsec !== null)
  if (told.length === 0) return all
  const band = bandOfView(view.key)
  const own = planes.find((plane) => plane.band === band)
  const finest = told.reduce((best, plane) => (scaleOf(plane) < scaleOf(best) * (1 - SAME_SCALE) ? plane : best))
  const basis = own ? (own.pixelScaleArcsec === null ? told.find((plane) => sameSize(plane, own)) : own) : finest
  const fits = basis !== undefined && (own !== undefined || isSizeOf(basis, view))
  const scale = fits ? (all.pixelScaleArcsec ?? scaleOf(basis)) : null
  return { ...all, pixelScaleArcsec: scale }
}

const agree = (scales: readonly number[]): boolean =>
  scales.every((scale) => Math.abs(scale - scales[0]) <= SAME_SCALE * scales[0])

const scaleOf = (plane: PlaneFacts): number => plane.pixelScaleArcsec ?? Number.POSITIVE_INFINITY

interface Size {
  width: number
  height: number
}
const sameSize = (a: Size, b: Size): boolean => a.width === b.width && a.height === b.height
/** A quarter turn swaps the sides. */
const isSizeOf = (plane: Size, view: Size): boolean =>
  sameSize(plane, view) || sameSize({ width: plane.height, height: plane.width }, view)
