import { geoAzimuthalEqualArea, geoAzimuthalEqualAreaRaw, geoProjection, type GeoProjection } from 'd3-geo'
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
  /** half the side that the frame shows, about; 90 for the whole sky */
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
 * An equal-area projection that shows an extent of the sky: Lambert's zenithal one round its centre (ZEA, section 5.1.7), or the whole
 * sky. Right ascension grows to the left, as seen from inside the sphere; north is up.
 */
export function skyProjection(extent: SkyExtent | null): SkyProjection {
  const { left, top, right, bottom } = FRAME
  if (extent === null || extent.radiusDeg > WIDEST_REGION_DEG) {
    const raDeg = extent && Math.cos((extent.centre.raDeg * Math.PI) / 180) < 0 ? 180 : 0
    const projection = geoProjection(hammerRaw)
      .rotate([-raDeg, 0])
      .reflectX(true)
      .precision(0.3)
      .fitExtent(
        [
          [6, 14],
          [WIDTH - 6, 212],
        ],
        { type: 'Sphere' },
      )
    return { projection, wholeSky: true, centre: { raDeg, decDeg: 0 }, reachDeg: 90 }
  }
  const { raDeg, decDeg } = extent.centre
  const reachDeg = Math.max(LEAST_REACH_DEG, extent.radiusDeg * MARGIN)
  // Lambert's radius: r = 2 sin(theta / 2).
  const scale = (bottom - top) / 2 / (2 * Math.sin((reachDeg * Math.PI) / 360))
  const projection = geoAzimuthalEqualArea()
    .rotate([-raDeg, -decDeg])
    .reflectX(true)
    .scale(scale)
    .translate([(left + right) / 2, (top + bottom) / 2])
    .precision(0.3)
    .clipExtent([
      [left, top],
      [right, bottom],
    ])
  return { projection, wholeSky: false, centre: { raDeg, decDeg }, reachDeg }
}
