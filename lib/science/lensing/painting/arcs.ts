/** Where lensed light lies round the middle of the lens: what is marked over a picture and said in words. */
import type { PixelSize } from './lensed-light'
import { pixelOf, type SkyGrid } from './sky-grid'

/** One stretch of light, as rays from the middle: position angle (north through east) and the radii between which it is bright. */
export interface PaintedArc {
  rays: { positionAngleDeg: number; innerArcsec: number; outerArcsec: number }[]
  /** Of its brightest place. */
  positionAngleDeg: number
  radiusArcsec: number
  /** Extent in position angle. */
  lengthDeg: number
  /** Its brightest place over the brightest of all, 0 to 1. */
  brightness: number
}

const RAYS = 120
const STEP_ARCSEC = 0.05
/** Light above this share of the brightest place is marked. */
const MARKED_SHARE = 0.3
/** In Einstein radii. */
const INNER = 0.15
const OUTER = 2.6

interface Ray {
  positionAngleDeg: number
  innerArcsec: number
  outerArcsec: number
  peak: number
  peakArcsec: number
}

/** Brightest first. A full ring is one arc of 360 degrees. */
export function arcsOf(
  light: Float64Array,
  size: PixelSize,
  grid: SkyGrid,
  einsteinRadiusArcsec: number,
): PaintedArc[] {
  const rays = Array.from({ length: RAYS }, (_, k) =>
    lookAlong(light, size, grid, (360 * k) / RAYS, einsteinRadiusArcsec),
  )
  const most = Math.max(...rays.map(({ peak }) => peak))
  if (!(most > 0)) return []
  const marked = rays.map((ray) =>
    ray.peak >= MARKED_SHARE * most ? boundsOf(light, size, grid, ray, MARKED_SHARE * most) : null,
  )
  return runsOf(marked)
    .map((run) => describe(run, most))
    .sort((a, b) => b.brightness - a.brightness)
}

function lookAlong(light: Float64Array, size: PixelSize, grid: SkyGrid, angle: number, einsteinRadius: number): Ray {
  const ray: Ray = { positionAngleDeg: angle, innerArcsec: 0, outerArcsec: 0, peak: 0, peakArcsec: 0 }
  for (let r = INNER * einsteinRadius; r < OUTER * einsteinRadius; r += STEP_ARCSEC) {
    const value = lightAt(light, size, grid, angle, r)
    if (value > ray.peak) {
      ray.peak = value
      ray.peakArcsec = r
    }
  }
  return ray
}

function boundsOf(light: Float64Array, size: PixelSize, grid: SkyGrid, ray: Ray, least: number): Ray {
  let [innerArcsec, outerArcsec] = [ray.peakArcsec, ray.peakArcsec]
  const bright = (r: number) => lightAt(light, size, grid, ray.positionAngleDeg, r) >= least
  while (innerArcsec > STEP_ARCSEC && bright(innerArcsec - STEP_ARCSEC)) innerArcsec -= STEP_ARCSEC
  while (bright(outerArcsec + STEP_ARCSEC)) outerArcsec += STEP_ARCSEC
  return { ...ray, innerArcsec, outerArcsec }
}

function lightAt(
  light: Float64Array,
  { width, height }: PixelSize,
  grid: SkyGrid,
  angleDeg: number,
  r: number,
): number {
  const angle = (angleDeg * Math.PI) / 180
  const { x, y } = pixelOf(grid, r * Math.sin(angle), r * Math.cos(angle))
  const [column, row] = [Math.floor(x), Math.floor(y)]
  if (column < 0 || row < 0 || column + 1 >= width || row + 1 >= height) return 0
  const [u, v] = [x - column, y - row]
  const i = row * width + column
  return (1 - v) * ((1 - u) * light[i] + u * light[i + 1]) + v * ((1 - u) * light[i + width] + u * light[i + width + 1])
}

/** Neighbouring rays together, past north too. */
function runsOf(rays: readonly (Ray | null)[]): Ray[][] {
  const gap = rays.indexOf(null)
  if (gap < 0) return [rays.filter((ray) => ray !== null)]
  const runs: Ray[][] = []
  let run: Ray[] = []
  for (let k = 1; k <= rays.length; k++) {
    const ray = rays[(gap + k) % rays.length]
    if (ray) run.push(ray)
    else if (run.length > 0) {
      runs.push(run)
      run = []
    }
  }
  return runs
}

function describe(run: readonly Ray[], most: number): PaintedArc {
  const brightest = run.reduce((best, ray) => (ray.peak > best.peak ? ray : best))
  const round = (value: number) => Math.round(value * 1000) / 1000
  return {
    rays: run.map(({ positionAngleDeg, innerArcsec, outerArcsec }) => ({
      positionAngleDeg,
      innerArcsec: round(innerArcsec),
      outerArcsec: round(outerArcsec),
    })),
    positionAngleDeg: brightest.positionAngleDeg,
    radiusArcsec: round(brightest.peakArcsec),
    lengthDeg: (run.length * 360) / RAYS,
    brightness: round(brightest.peak / most),
  }
}
