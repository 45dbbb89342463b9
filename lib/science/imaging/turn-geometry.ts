import type { StampGeometry } from './stamp-geometry'

/**
 * Scale and compass of a picture that is shown turned: by quarters counter-clockwise and, from 4 on, mirrored left to right first
 * (as turnPixels of lib/science/lensing/painting turns it).
 */
export function turnGeometry(geometry: StampGeometry, turned: number): StampGeometry {
  const { northAngleDeg, eastLeft } = geometry
  if (northAngleDeg === null) return { ...geometry, eastLeft: turned >= 4 ? !eastLeft : eastLeft }
  const mirrored = turned >= 4 ? -northAngleDeg : northAngleDeg
  const angle = mirrored + 90 * (turned % 4)
  return {
    ...geometry,
    northAngleDeg: ((((angle + 180) % 360) + 360) % 360) - 180 + 0,
    eastLeft: turned >= 4 ? !eastLeft : eastLeft,
  }
}
