// Pixels to sky and back for the projections of cutouts: TAN and SIN, with SIP distortion. Sources: E. Greisen & M. Calabretta
// 2002, A&A 395, 1061 (paper I); M. Calabretta & E. Greisen 2002, A&A 395, 1077 (paper II), sections 2.4, 5.1.3 and 5.1.5.
// Pixels here count from 0 with y = 0 the bottom row: one less than in FITS.
import { anglesDeg, dot, fromIcrs, toIcrs, unitVector, type SkyFrame, type Vector } from '@/lib/science/sky/frames'
import type { SkyPosition } from '@/lib/science/sky/separation'
import { sipShift, undoSip, type Sip } from '@/lib/science/sky/sip'

export { readWcs, WcsError } from '@/lib/science/sky/read-wcs'

/** A plain object: it crosses worker threads and can be stored as JSON. */
export interface Wcs {
  projection: 'TAN' | 'SIN'
  frame: SkyFrame
  /** CRPIX as FITS counts, from 1. */
  referencePixel: readonly [number, number]
  /** Longitude and latitude of the reference point in `frame`, degrees. */
  referencePoint: readonly [number, number]
  /** Degrees per pixel; row 0 gives longitude, row 1 latitude. */
  matrix: readonly [readonly [number, number], readonly [number, number]]
  /** LONPOLE, degrees. */
  poleLongitudeDeg: number
  sip: Sip | null
  /** NAXIS1 and NAXIS2 where the header has them. */
  size: readonly [number, number] | null
}

const RADIANS = Math.PI / 180

/** ICRS position of a pixel. NaN where the projection has no such place (SIN beyond its edge) or the input is NaN. */
export function pixelToSky(wcs: Wcs, x: number, y: number): SkyPosition {
  let u = x + 1 - wcs.referencePixel[0]
  let v = y + 1 - wcs.referencePixel[1]
  if (wcs.sip !== null) {
    const [du, dv] = sipShift(wcs.sip, u, v)
    u += du
    v += dv
  }
  const [[a, b], [c, d]] = wcs.matrix
  const east = (a * u + b * v) * RADIANS
  const north = (c * u + d * v) * RADIANS
  const radius2 = east * east + north * north
  // Native direction: its component along the reference point, and across (paper II, equations 54, 55, 59, 60).
  const along = wcs.projection === 'TAN' ? 1 / Math.sqrt(1 + radius2) : Math.sqrt(1 - radius2)
  const across = wcs.projection === 'TAN' ? along : 1
  const [e, n, p] = axes(wcs)
  const direction = [0, 1, 2].map((i) => across * (east * e[i] + north * n[i]) + along * p[i]) as unknown as Vector
  const [raDeg, decDeg] = anglesDeg(toIcrs(wcs.frame, direction))
  return { raDeg, decDeg }
}

/** Pixel of an ICRS position; NaN on the half of the sky that the projection does not show. */
export function skyToPixel(wcs: Wcs, raDeg: number, decDeg: number): { x: number; y: number } {
  const direction = fromIcrs(wcs.frame, unitVector(raDeg, decDeg))
  const [e, n, p] = axes(wcs)
  const along = dot(direction, p)
  if (!(along > 0)) return { x: NaN, y: NaN }
  const across = wcs.projection === 'TAN' ? along : 1
  const east = dot(direction, e) / across / RADIANS
  const north = dot(direction, n) / across / RADIANS
  const [[a, b], [c, d]] = wcs.matrix
  const determinant = a * d - b * c
  let u = (d * east - b * north) / determinant
  let v = (a * north - c * east) / determinant
  if (wcs.sip !== null) [u, v] = undoSip(wcs.sip, u, v)
  return { x: u + wcs.referencePixel[0] - 1, y: v + wcs.referencePixel[1] - 1 }
}

/** Pixel scale along x and y in arcseconds: the norms of the matrix's columns, which hold at the reference point. */
export function pixelScaleArcsec(wcs: Wcs): [number, number] {
  const [[a, b], [c, d]] = wcs.matrix
  return [Math.hypot(a, c) * 3600, Math.hypot(b, d) * 3600]
}

/**
 * How the sky lies in the image at its centre (or at the reference pixel when the header gives no size).
 * northAngleDeg: ICRS north from image +y, counter-clockwise with y up, -180 to 180. eastLeft: east is 90 degrees
 * counter-clockwise from north, as on the sky; false for a mirrored image.
 */
export function orientation(wcs: Wcs): { northAngleDeg: number; eastLeft: boolean } {
  const x = wcs.size === null ? wcs.referencePixel[0] - 1 : (wcs.size[0] - 1) / 2
  const y = wcs.size === null ? wcs.referencePixel[1] - 1 : (wcs.size[1] - 1) / 2
  const centre = pixelToSky(wcs, x, y)
  const step = 1 / 3600
  const sense = centre.decDeg + step > 90 ? -1 : 1
  const toward = skyToPixel(wcs, centre.raDeg, centre.decDeg + sense * step)
  const [dx, dy] = [sense * (toward.x - x), sense * (toward.y - y)]
  const [[a, b], [c, d]] = wcs.matrix
  return { northAngleDeg: Math.atan2(-dx, dy) / RADIANS + 0, eastLeft: a * d - b * c < 0 }
}

/**
 * Unit vectors in the frame of the WCS: toward increasing x and y of the projection plane, and to the reference point.
 * LONPOLE turns the plane: with 180 degrees y is north (paper II, 2.4).
 */
function axes(wcs: Wcs): [Vector, Vector, Vector] {
  const [lon, lat] = [wcs.referencePoint[0] * RADIANS, wcs.referencePoint[1] * RADIANS]
  const east: Vector = [-Math.sin(lon), Math.cos(lon), 0]
  const north: Vector = [-Math.sin(lat) * Math.cos(lon), -Math.sin(lat) * Math.sin(lon), Math.cos(lat)]
  const pole = unitVector(wcs.referencePoint[0], wcs.referencePoint[1])
  if (wcs.poleLongitudeDeg === 180) return [east, north, pole]
  const angle = (wcs.poleLongitudeDeg - 180) * RADIANS
  const [c, s] = [Math.cos(angle), Math.sin(angle)]
  const mix = (p: number, q: number): Vector => [0, 1, 2].map((i) => p * east[i] + q * north[i]) as unknown as Vector
  return [mix(c, -s), mix(s, c), pole]
}
