// Separation and direction of two places on the sphere.

export interface SkyPosition {
  raDeg: number
  decDeg: number
}

const RADIANS = Math.PI / 180
const ARCSEC_PER_RADIAN = 3600 / RADIANS

/**
 * Angular separation in arcseconds.
 *   d = atan2( hypot(cos d2 sin da, cos d1 sin d2 - sin d1 cos d2 cos da),  sin d1 sin d2 + cos d1 cos d2 cos da )
 * Vincenty's form for a sphere, because the arccos form resolves no better than 0.003 arcsec in doubles.
 * Source: T. Vincenty 1975, Survey Review 23, 88 (equal radii).
 * @param a, b positions in degrees in one frame; any finite right ascension.
 * @returns 0 to 648000; NaN if any input is NaN. Never throws.
 */
export function separationArcsec(a: SkyPosition, b: SkyPosition): number {
  const { east, north, along } = offset(a, b)
  return Math.atan2(Math.hypot(east, north), along) * ARCSEC_PER_RADIAN
}

/**
 * Position angle of `b` as seen from `a`, north through east, 0 <= angle < 360 degrees.
 *   tan PA = cos d2 sin da / (cos d1 sin d2 - sin d1 cos d2 cos da)
 * Source: J. Meeus, Astronomical Algorithms, 2nd ed., chapter 17. Undefined (some number) where the two places are the same
 * or opposite, or `a` is a pole. NaN in, NaN out.
 */
export function positionAngleDeg(a: SkyPosition, b: SkyPosition): number {
  const { east, north } = offset(a, b)
  const angle = Math.atan2(east, north) / RADIANS
  return angle < 0 ? (angle + 360) % 360 : angle
}

/**
 * Half-width in right ascension, in degrees, of the box that holds a cone: asin(sin r / cos d), and 180 where the cone touches
 * a pole. For searching by right ascension first; widen it by a little for rounding. Source: spherical sine rule.
 * @param decDeg declination of the centre, -90 to 90. @param radiusArcsec 0 or more.
 */
export function coneHalfWidthDeg(decDeg: number, radiusArcsec: number): number {
  if (Math.abs(decDeg) + radiusArcsec / 3600 >= 90) return 180
  return Math.asin(Math.sin(radiusArcsec / ARCSEC_PER_RADIAN) / Math.cos(decDeg * RADIANS)) / RADIANS
}

/** Components of the unit vector to `b` toward east and north at `a`, and along `a` itself. */
function offset(a: SkyPosition, b: SkyPosition): { east: number; north: number; along: number } {
  const turn = (b.raDeg - a.raDeg) * RADIANS
  const [sinA, cosA] = [Math.sin(a.decDeg * RADIANS), Math.cos(a.decDeg * RADIANS)]
  const [sinB, cosB] = [Math.sin(b.decDeg * RADIANS), Math.cos(b.decDeg * RADIANS)]
  return {
    east: cosB * Math.sin(turn),
    north: cosA * sinB - sinA * cosB * Math.cos(turn),
    along: sinA * sinB + cosA * cosB * Math.cos(turn),
  }
}
