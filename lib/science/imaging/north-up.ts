/** A plane turned (and mirrored where need be) so that north is up and east is left. */
import type { BandPlane } from './normalise-planes'
import { resample } from './resample'
import type { StampGeometry } from './stamp-geometry'

/**
 * Keeps the pixel scale and the middle. A quarter turn swaps the sides; any other keeps the size, so corners are lost and
 * others have no data (NaN). Interpolated as in resample.ts; quarter turns and mirrors move pixels exactly.
 * @param geometry north in degrees counter-clockwise from up, and whether east is 90 degrees counter-clockwise of it.
 * @returns the plane itself when the direction of north is not known.
 */
export function northUp(
  plane: BandPlane,
  { northAngleDeg, eastLeft }: Pick<StampGeometry, 'northAngleDeg' | 'eastLeft'>,
): BandPlane {
  if (northAngleDeg === null || !Number.isFinite(northAngleDeg)) return plane
  const angle = (northAngleDeg * Math.PI) / 180
  const sin = Math.sin(angle)
  const cos = Math.cos(angle)
  const side = eastLeft ? 1 : -1
  // A step up in the new picture goes north, a step to the right goes west.
  const west = { x: side * cos, y: side * sin }
  const north = { x: -sin, y: cos }
  const quarter = Math.abs(sin) > 1 - 1e-9
  const width = quarter ? plane.height : plane.width
  const height = quarter ? plane.width : plane.height
  const middleX = (width - 1) / 2
  const middleY = (height - 1) / 2
  const data = resample(plane.data, plane.width, plane.height, {
    width,
    height,
    x0: (plane.width - 1) / 2 - west.x * middleX - north.x * middleY,
    y0: (plane.height - 1) / 2 - west.y * middleX - north.y * middleY,
    xx: west.x,
    xy: north.x,
    yx: west.y,
    yy: north.y,
  })
  return { ...plane, width, height, data, sky: undefined }
}
