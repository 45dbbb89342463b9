import type { PlaneGeometry } from '@/db/queries/stamps'
import type { StampGeometry } from '@/lib/science/imaging/stamp-geometry'
import { orientation, type Wcs } from '@/lib/science/sky/wcs'

export const UNKNOWN_GEOMETRY: StampGeometry = { pixelScaleArcsec: null, northAngleDeg: null, eastLeft: true }

/** Two pixel scales are the same when they differ by less than this share: a bar of 5 arcsec stays right to the eye. */
const SAME_SCALE = 0.01

/**
 * One scale and one compass for all views of a candidate. A manifest's scale wins. Where the bands differ in scale no bar is
 * drawn, as it would be wrong in one of them. The compass is that of the first band that has a WCS.
 * @param planes of one candidate, in the order of the campaign's bands.
 */
export function candidateGeometry(planes: readonly PlaneGeometry[]): StampGeometry {
  const scales = planes.flatMap((plane) => plane.pixelScaleArcsec ?? [])
  const agree = scales.every((scale) => Math.abs(scale - scales[0]) <= SAME_SCALE * scales[0])
  const pixelScaleArcsec = agree ? (planes[0]?.candidateScaleArcsec ?? scales[0] ?? null) : null
  const solved = planes.find((plane) => plane.wcs !== null)
  if (!solved?.wcs) return { ...UNKNOWN_GEOMETRY, pixelScaleArcsec }
  const { northAngleDeg, eastLeft } = orientation(JSON.parse(solved.wcs) as Wcs)
  return { pixelScaleArcsec, northAngleDeg: Number.isFinite(northAngleDeg) ? northAngleDeg : null, eastLeft }
}
