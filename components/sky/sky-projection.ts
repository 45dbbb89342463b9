import { geoAzimuthalEqualArea, geoAzimuthalEqualAreaRaw, geoProjection, type GeoProjection } from 'd3-geo'
import type { SkyPosition } from '@/lib/science/sky/separation'
import type { SkyExtent } from '@/lib/science/sky/sky-extent'

/** Of the drawing, in its own units. The right and the bottom leave room for labels of the grid. */
export const WIDTH = 400
export const HEIGHT = 300
export const FRAME = { left: 44, top: 8, right: 392, bottom: 262 }

export interface SkyProjection {
  projection: GeoProjection
  wholeSky: boolean
  /** degrees of right ascension and declination in the middle */
  centre: { raDeg: number; decDeg: number }
  /** half the height that the frame shows, about; 90 for the whole sky */
  reachDeg: number
}

/** A wider region than this is shown on a map of the whole sky. */
const WIDEST_REGION_DEG = 50
/** A smaller one is shown in a field of this, so that one entry does not fill the map. */
const LEAST_REACH_DEG = 0.05
const MARGIN = 1.12

/**
 * Hammer's equal-area map of the whole sky, from Lambert's azimuthal one: x = 2 x_L(lambda / 2, phi), y = y_L(lambda / 2, phi).
 * Source: Calabretta & Greisen 2002, A&A 395, 1077, section 5.3.4 (AIT, there named Hammer-Aitoff).
 */
function hammerRaw(lambda: number, phi: number): [number, number] {
  const [x, y] = geoAzimuthalEqualAreaRaw(lambda / 2, phi)
  return [2 * x, y]
}

/**
 * An equal-area projection that shows an extent of the sky: Lambert's zenithal one round its centre (ZEA, section 5.1.7), as large as the
 * places in it allow, or the whole sky. Right ascension grows to the left, as seen from inside the sphere; north is up.
 * @param places degrees, of what is to be seen
 */
export function skyProjection(extent: SkyExtent | null, places: Iterable<SkyPosition>): SkyProjection {
  if (extent === null || extent.radiusDeg > WIDEST_REGION_DEG) return wholeSky(extent)
  const { raDeg, decDeg } = extent.centre
  const { left, top, right, bottom } = FRAME
  const projection = geoAzimuthalEqualArea().rotate([-raDeg, -decDeg]).reflectX(true).scale(1).translate([0, 0])
  const bounds = boundsOf(projection, places)
  // Lambert's radius: r = 2 sin(theta / 2), which is theta in radians where that is small.
  const least = (LEAST_REACH_DEG * Math.PI) / 180
  const halfWidth = Math.max(least, ((bounds.right - bounds.left) / 2) * MARGIN)
  const halfHeight = Math.max(least, ((bounds.bottom - bounds.top) / 2) * MARGIN)
  const scale = Math.min((right - left) / 2 / halfWidth, (bottom - top) / 2 / halfHeight)
  projection
    .scale(scale)
    .translate([
      (left + right) / 2 - (scale * (bounds.left + bounds.right)) / 2,
      (top + bottom) / 2 - (scale * (bounds.top + bounds.bottom)) / 2,
    ])
    .clipExtent([
      [left, top],
      [right, bottom],
    ])
  const [middleRa, middleDec] = projection.invert?.([(left + right) / 2, (top + bottom) / 2]) ?? [raDeg, decDeg]
  const reachDeg = (2 * Math.asin(Math.min(1, (bottom - top) / 4 / scale)) * 180) / Math.PI
  return { projection, wholeSky: false, centre: { raDeg: middleRa, decDeg: middleDec }, reachDeg }
}

function wholeSky(extent: SkyExtent | null): SkyProjection {
  const raDeg = extent && Math.cos((extent.centre.raDeg * Math.PI) / 180) < 0 ? 180 : 0
  const projection = geoProjection(hammerRaw)
    .rotate([-raDeg, 0])
    .reflectX(true)
    .fitExtent(
      [
        [6, 14],
        [WIDTH - 6, 212],
      ],
      { type: 'Sphere' },
    )
  return { projection, wholeSky: true, centre: { raDeg, decDeg: 0 }, reachDeg: 90 }
}

function boundsOf(projection: GeoProjection, places: Iterable<SkyPosition>) {
  const bounds = { left: Infinity, right: -Infinity, top: Infinity, bottom: -Infinity }
  for (const { raDeg, decDeg } of places) {
    const [x, y] = projection([raDeg, decDeg]) ?? [0, 0]
    bounds.left = Math.min(bounds.left, x)
    bounds.right = Math.max(bounds.right, x)
    bounds.top = Math.min(bounds.top, y)
    bounds.bottom = Math.max(bounds.bottom, y)
  }
  return bounds.left <= bounds.right ? bounds : { left: 0, right: 0, top: 0, bottom: 0 }
}
