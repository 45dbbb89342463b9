/** Offsets on the sky to steps on a picture and back, at the size of a cutout, where the tangent plane is flat. */
import type { SkyVector } from '@/lib/science/lensing/sis'
import type { StampStep } from './measure-stamp'
import type { StampGeometry } from './stamp-geometry'

/**
 * Directions of north and east on the picture, as (right, down) of a unit step. Where the orientation is not known the picture is
 * taken to have north up and east on the left, which its offsets then only mean by agreement.
 */
function axes({ northAngleDeg, eastLeft }: StampGeometry): { north: [number, number]; east: [number, number] } {
  const angle = ((northAngleDeg ?? 0) * Math.PI) / 180
  const [sin, cos] = [Math.sin(angle), Math.cos(angle)]
  const side = northAngleDeg === null || eastLeft ? 1 : -1
  return { north: [-sin, -cos], east: [-cos * side, sin * side] }
}

/** @param offset arcsec. @returns pixels of the picture, to the right and down; NaN where the pixel scale is not known. */
export function stepOfOffset(offset: SkyVector, geometry: StampGeometry): StampStep {
  const scale = geometry.pixelScaleArcsec ?? Number.NaN
  const { north, east } = axes(geometry)
  return {
    right: (offset.east * east[0] + offset.north * north[0]) / scale,
    down: (offset.east * east[1] + offset.north * north[1]) / scale,
  }
}

/** The other way round; north and east are at right angles, so the inverse is the transpose. */
export function offsetOfStep({ right, down }: StampStep, geometry: StampGeometry): SkyVector {
  const scale = geometry.pixelScaleArcsec ?? Number.NaN
  const { north, east } = axes(geometry)
  return {
    east: (right * east[0] + down * east[1]) * scale,
    north: (right * north[0] + down * north[1]) * scale,
  }
}
