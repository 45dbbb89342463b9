/** Where the pixels of a plane lie on the sky round the middle of a galaxy, in arcsec east and north. */
import { pixelToSky, skyToPixel, type Wcs } from '@/lib/science/sky/wcs'
import type { SkyPosition } from '@/lib/science/sky/separation'

/** East = a dx + b dy, north = c dx + d dy, for dx and dy pixels from (x, y). */
export interface SkyGrid {
  x: number
  y: number
  a: number
  b: number
  c: number
  d: number
}

const STEP_PIXELS = 5

/** The grid of a plane round a place of it, straight over the size of a cutout. Null where the WCS has no value there. */
export function skyGrid(wcs: Wcs, x: number, y: number): SkyGrid | null {
  const middle = pixelToSky(wcs, x, y)
  const along = offset(middle, pixelToSky(wcs, x + STEP_PIXELS, y))
  const back = offset(middle, pixelToSky(wcs, x - STEP_PIXELS, y))
  const up = offset(middle, pixelToSky(wcs, x, y + STEP_PIXELS))
  const down = offset(middle, pixelToSky(wcs, x, y - STEP_PIXELS))
  const span = 2 * STEP_PIXELS
  const grid = {
    x,
    y,
    a: (along.east - back.east) / span,
    b: (up.east - down.east) / span,
    c: (along.north - back.north) / span,
    d: (up.north - down.north) / span,
  }
  return Number.isFinite(grid.a + grid.b + grid.c + grid.d) && pixelArea(grid) > 0 ? grid : null
}

/** The grid of a plane without a WCS: north up, east left, square pixels. */
export const plainGrid = (x: number, y: number, pixelScaleArcsec: number): SkyGrid => ({
  x,
  y,
  a: -pixelScaleArcsec,
  b: 0,
  c: 0,
  d: pixelScaleArcsec,
})

/** The place of a plane that shows the same spot of the sky as the middle of `grid`. */
export function samePlace(from: Wcs, grid: SkyGrid, to: Wcs): { x: number; y: number } {
  const { raDeg, decDeg } = pixelToSky(from, grid.x, grid.y)
  return skyToPixel(to, raDeg, decDeg)
}

/** Square arcsec. */
export const pixelArea = ({ a, b, c, d }: SkyGrid): number => Math.abs(a * d - b * c)

/** Position angle of the direction that lies at `angleDeg` from +x towards +y, degrees in [0, 180). */
export function positionAngleOf({ a, b, c, d }: SkyGrid, angleDeg: number): number {
  const angle = (angleDeg * Math.PI) / 180
  const [dx, dy] = [Math.cos(angle), Math.sin(angle)]
  const degrees = (Math.atan2(a * dx + b * dy, c * dx + d * dy) * 180) / Math.PI
  return ((degrees % 180) + 180) % 180
}

/** Pixel of an offset from the middle of the grid. */
export function pixelOf({ x, y, a, b, c, d }: SkyGrid, east: number, north: number): { x: number; y: number } {
  const determinant = a * d - b * c
  return { x: x + (d * east - b * north) / determinant, y: y + (a * north - c * east) / determinant }
}

/** On the tangent plane; cutouts are small, so the first order in the distance is enough. */
function offset(from: SkyPosition, to: SkyPosition): { east: number; north: number } {
  const turn = ((((to.raDeg - from.raDeg) % 360) + 540) % 360) - 180
  return {
    east: turn * 3600 * Math.cos((((from.decDeg + to.decDeg) / 2) * Math.PI) / 180),
    north: (to.decDeg - from.decDeg) * 3600,
  }
}
