import type { StampGeometry } from '@/lib/science/imaging/stamp-geometry'
import type { SkyPosition } from '@/lib/science/sky/separation'

/** A step on a picture as it is shown: pixels to the right and down. */
export interface StampStep {
  right: number
  down: number
}

const RADIAN = Math.PI / 180
const ARCSEC = RADIAN / 3600

/**
 * Length and direction of a step on a picture with square pixels. At the size of a cutout (minutes of arc) the tangent plane is
 * the sky to better than a millionth.
 * @returns lengthArcsec, null where the pixel scale is unknown; positionAngleDeg from north through east, 0 to 360, null where the
 * picture's orientation is unknown or the step has no length.
 */
export function measureStep(
  step: StampStep,
  geometry: StampGeometry,
): { lengthArcsec: number | null; positionAngleDeg: number | null } {
  const { pixelScaleArcsec, northAngleDeg, eastLeft } = geometry
  const length = Math.hypot(step.right, step.down)
  const lengthArcsec = pixelScaleArcsec === null ? null : length * pixelScaleArcsec
  if (northAngleDeg === null || length === 0) return { lengthArcsec, positionAngleDeg: null }
  // Counter-clockwise from up, as the angle of north is told.
  const angleDeg = Math.atan2(-step.right, -step.down) / RADIAN
  const fromNorth = eastLeft ? angleDeg - northAngleDeg : northAngleDeg - angleDeg
  return { lengthArcsec, positionAngleDeg: ((fromNorth % 360) + 360) % 360 }
}

/**
 * The place on the sky a step away from a known one, by the gnomonic projection about the latter.
 * Source: Calabretta and Greisen 2002, A&A 395, 1077, section 5.1.3 (TAN), written for small offsets.
 * @param from ICRS, degrees.
 * @returns ICRS, right ascension 0 to 360; null where scale or orientation is unknown.
 */
export function placeOnSky(from: SkyPosition, step: StampStep, geometry: StampGeometry): SkyPosition | null {
  const { lengthArcsec, positionAngleDeg } = measureStep(step, geometry)
  if (lengthArcsec === 0) return from
  if (lengthArcsec === null || positionAngleDeg === null) return null
  const east = lengthArcsec * ARCSEC * Math.sin(positionAngleDeg * RADIAN)
  const north = lengthArcsec * ARCSEC * Math.cos(positionAngleDeg * RADIAN)
  const sine = Math.sin(from.decDeg * RADIAN)
  const cosine = Math.cos(from.decDeg * RADIAN)
  const along = cosine - north * sine
  const raDeg = from.raDeg + Math.atan2(east, along) / RADIAN
  const decDeg = Math.atan2(sine + north * cosine, Math.hypot(east, along)) / RADIAN
  return { raDeg: ((raDeg % 360) + 360) % 360, decDeg }
}
