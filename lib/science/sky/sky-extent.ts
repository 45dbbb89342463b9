// Where on the sky a list of positions lies, for choosing what a map shows.
import { separationArcsec, type SkyPosition } from './separation'

export interface SkyExtent {
  centre: SkyPosition
  /** from the centre to the farthest of them */
  radiusDeg: number
}

const RADIANS = Math.PI / 180
/** A mean direction shorter than this is none: the positions lie all round. */
const LEAST_LENGTH = 1e-3

/**
 * The mean direction of positions (mean of the unit vectors, normalised) and how far the farthest lies from it.
 * @param positions degrees, finite. @returns null for none, and where they have no mean direction, being spread round the sky.
 */
export function skyExtent(positions: readonly SkyPosition[]): SkyExtent | null {
  let [x, y, z] = [0, 0, 0]
  for (const { raDeg, decDeg } of positions) {
    const cosDec = Math.cos(decDeg * RADIANS)
    x += cosDec * Math.cos(raDeg * RADIANS)
    y += cosDec * Math.sin(raDeg * RADIANS)
    z += Math.sin(decDeg * RADIANS)
  }
  const length = Math.hypot(x, y, z)
  if (positions.length === 0 || length / positions.length < LEAST_LENGTH) return null
  const raDeg = Math.atan2(y, x) / RADIANS
  const centre = { raDeg: raDeg < 0 ? raDeg + 360 : raDeg, decDeg: Math.atan2(z, Math.hypot(x, y)) / RADIANS }
  const radiusArcsec = positions.reduce((most, position) => Math.max(most, separationArcsec(centre, position)), 0)
  return { centre, radiusDeg: radiusArcsec / 3600 }
}
