/** The light of a source seen through its lens: ray-traced onto pixels, then blurred by the seeing of the picture. */
import { sersicBrightness } from '../sersic'
import { deflection, lensModel } from '../sie-shear'
import { pointSpread } from '../simulator/point-spread'
import type { Painting } from './painting-ranges'
import { pixelArea, type SkyGrid } from './sky-grid'

/** Moffat beta of the seeing that is painted: 2.5 to 4.765 fit real stars and turbulence (I. Trujillo et al., MNRAS 328, 977 (2001)). */
export const SEEING_BETA = 3.5
/** The point-spread function is cut where it holds over 99 % of its light. */
const KERNEL_WIDTHS = 3.5
const MOST_KERNEL_PIXELS = 40
const LEAST_SAMPLES = 3
const MOST_SAMPLES = 11

export interface PixelSize {
  width: number
  height: number
}

/**
 * Light in each pixel, row 0 at the bottom, where the source without its lens has the total light 1. Surface brightness is
 * conserved: the picture shows at theta what the source has at theta - alpha(theta). Light that seeing scatters in from beyond
 * the edge is counted.
 * @param seeingArcsec full width at half maximum; 0 leaves the light unblurred.
 * @param traces of this painting before blurring, kept for bands that share a grid.
 */
export function lensedLight(
  painting: Painting,
  grid: SkyGrid,
  size: PixelSize,
  seeingArcsec: number,
  traces = new Map<string, Float64Array>(),
): Float64Array {
  const scaleX = Math.hypot(grid.a, grid.c)
  const scaleY = Math.hypot(grid.b, grid.d)
  const reach = (scale: number) =>
    seeingArcsec > 0 ? Math.min(MOST_KERNEL_PIXELS, 4 * Math.ceil((KERNEL_WIDTHS * seeingArcsec) / scale / 4)) : 0
  const [marginX, marginY] = [reach(scaleX), reach(scaleY)]
  const canvas = { width: size.width + 2 * marginX, height: size.height + 2 * marginY }
  const onCanvas = { ...grid, x: grid.x + marginX, y: grid.y + marginY }
  const key = JSON.stringify([onCanvas, canvas])
  const traced = traces.get(key) ?? trace(painting, onCanvas, canvas)
  traces.set(key, traced)
  if (marginX === 0 && marginY === 0) return traced
  return blur(traced, canvas, kernelOf(grid, seeingArcsec, marginX, marginY), size, marginX, marginY)
}

/** Unblurred; each pixel is the mean over n by n points, as many as the source is small. */
function trace(painting: Painting, grid: SkyGrid, { width, height }: PixelSize): Float64Array {
  const { source } = painting
  const model = lensModel({
    einsteinRadiusArcsec: painting.einsteinRadiusArcsec,
    axisRatio: painting.axisRatio,
    positionAngleDeg: painting.positionAngleDeg,
    shear: painting.shear,
  })
  // x to the west, so that position angles run as the profile counts them: from up through left.
  const brightness = sersicBrightness({
    effectiveRadiusArcsec: source.effectiveRadiusArcsec,
    index: source.sersicIndex,
    axisRatio: source.axisRatio,
    positionAngleDeg: source.positionAngleDeg,
    x: -source.east,
    y: source.north,
  })
  const area = pixelArea(grid)
  const finest = (source.effectiveRadiusArcsec * source.axisRatio) / 3
  const wanted = Math.ceil(Math.sqrt(area) / finest)
  const samples = Math.min(MOST_SAMPLES, Math.max(LEAST_SAMPLES, wanted))
  const lensed = 2.5 * painting.einsteinRadiusArcsec + 6 * source.effectiveRadiusArcsec
  const image = new Float64Array(width * height)
  for (let row = 0, i = 0; row < height; row++) {
    for (let column = 0; column < width; column++, i++) {
      const [dx, dy] = [column - grid.x, row - grid.y]
      const far = Math.hypot(grid.a * dx + grid.b * dy, grid.c * dx + grid.d * dy) > lensed
      const n = far ? 1 : samples
      let sum = 0
      for (let k = 0; k < n * n; k++) {
        const u = dx + ((k % n) + 0.5) / n - 0.5
        const v = dy + (Math.floor(k / n) + 0.5) / n - 0.5
        const east = grid.a * u + grid.b * v
        const north = grid.c * u + grid.d * v
        const alpha = deflection(model, { east, north })
        sum += brightness(alpha.east - east, north - alpha.north)
      }
      image[i] = (sum / (n * n)) * area
    }
  }
  return image
}

interface PixelKernel {
  radiusX: number
  radiusY: number
  values: Float64Array
}

/** The point-spread function over pixels of any shape, scaled to a sum of 1. */
function kernelOf(grid: SkyGrid, seeingArcsec: number, radiusX: number, radiusY: number): PixelKernel {
  const profile = pointSpread({ seeingArcsec, moffatBeta: SEEING_BETA, band: '', skyNoise: 0, electronsPerFlux: 0 })
  const side = 2 * radiusX + 1
  const values = new Float64Array(side * (2 * radiusY + 1))
  const points = 5
  let sum = 0
  for (let y = -radiusY; y <= radiusY; y++) {
    for (let x = -radiusX; x <= radiusX; x++) {
      let value = 0
      for (let k = 0; k < points * points; k++) {
        const u = x + ((k % points) + 0.5) / points - 0.5
        const v = y + (Math.floor(k / points) + 0.5) / points - 0.5
        value += profile(Math.hypot(grid.a * u + grid.b * v, grid.c * u + grid.d * v))
      }
      values[(y + radiusY) * side + x + radiusX] = value
      sum += value
    }
  }
  for (let i = 0; i < values.length; i++) values[i] /= sum
  return { radiusX, radiusY, values }
}

/** Each pixel with light hands it out: lensed light covers a small part of the picture. */
function blur(
  light: Float64Array,
  canvas: PixelSize,
  { radiusX, radiusY, values }: PixelKernel,
  size: PixelSize,
  marginX: number,
  marginY: number,
): Float64Array {
  const result = new Float64Array(size.width * size.height)
  const side = 2 * radiusX + 1
  let total = 0
  for (const value of light) total += value
  const nothing = total * 1e-8
  for (let row = 0, i = 0; row < canvas.height; row++) {
    for (let column = 0; column < canvas.width; column++, i++) {
      const value = light[i]
      if (!(value > nothing)) continue
      const [toX, toY] = [column - marginX, row - marginY]
      const [fromY, untilY] = [Math.max(0, toY - radiusY), Math.min(size.height - 1, toY + radiusY)]
      const [fromX, untilX] = [Math.max(0, toX - radiusX), Math.min(size.width - 1, toX + radiusX)]
      for (let y = fromY; y <= untilY; y++) {
        const line = (y - toY + radiusY) * side + radiusX - toX
        for (let x = fromX; x <= untilX; x++) result[y * size.width + x] += value * values[line + x]
      }
    }
  }
  return result
}
