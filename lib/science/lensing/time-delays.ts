/**
 * Arrival times of lensed images.
 *   t(x) = (1 + z_l) / c  D_l D_s / D_ls  ( |x - y|^2 / 2 - psi(x) )
 * Images stand at its minima and saddle points; only differences can be observed. For the singular isothermal sphere two images
 * at x1 and x2 differ by (1 + z_l) D_l D_s / (c D_ls) (x1^2 - x2^2) / 2.
 * Source: R. Blandford & R. Narayan, ApJ 310, 568 (1986); R. Narayan & M. Bartelmann, arXiv:astro-ph/9606001.
 */
import { PARSEC_M, RADIANS_PER_ARCSEC, SPEED_OF_LIGHT_KM_S } from './constants'
import { angularDiameterDistanceBetweenMpc, angularDiameterDistanceMpc, type Cosmology } from './cosmology'
import { potential, type LensModel, type PointImage } from './sie-shear'
import type { SkyVector } from './sis'

const SECONDS_PER_DAY = 86400

/**
 * Days of delay for one arcsec^2 of difference in the arrival-time function.
 * NaN where a redshift is missing, not above 0, or the source is not behind the lens: nothing is lensed then.
 */
export function daysPerSquareArcsec(cosmology: Cosmology, lensRedshift: number, sourceRedshift: number): number {
  if (!(lensRedshift > 0 && sourceRedshift > lensRedshift)) return Number.NaN
  const lens = angularDiameterDistanceMpc(cosmology, lensRedshift)
  const source = angularDiameterDistanceMpc(cosmology, sourceRedshift)
  const between = angularDiameterDistanceBetweenMpc(cosmology, lensRedshift, sourceRedshift)
  const lengthM = ((lens * source) / between) * 1e6 * PARSEC_M
  const seconds = ((1 + lensRedshift) * lengthM * RADIANS_PER_ARCSEC ** 2) / (SPEED_OF_LIGHT_KM_S * 1000)
  return seconds / SECONDS_PER_DAY
}

/** |x - y|^2 / 2 - psi(x), arcsec^2, for a source at y seen at x. */
export function arrivalTimeArcsec2(model: LensModel, source: SkyVector, at: SkyVector): number {
  const [east, north] = [at.east - source.east, at.north - source.north]
  return (east * east + north * north) / 2 - potential(model, at)
}

export interface DelayedImage extends PointImage {
  /** after the first image; 0 for that one, NaN without usable redshifts */
  delayDays: number
}

/** The images in the order in which a change of the source shows in them. */
export function delayedImages(
  model: LensModel,
  source: SkyVector,
  images: readonly PointImage[],
  daysPerArcsec2: number,
): DelayedImage[] {
  const timed = images.map((image) => ({ image, time: arrivalTimeArcsec2(model, source, image) }))
  timed.sort((a, b) => a.time - b.time)
  return timed.map(({ image, time }) => ({ ...image, delayDays: (time - timed[0].time) * daysPerArcsec2 }))
}

export interface SkyGrid {
  /** offsets of the first sample; samples go on to the west and to the south, as pixels of a stamp with north up */
  east: number
  north: number
  stepArcsec: number
  columns: number
  rows: number
}

/** The arrival-time function on a grid, arcsec^2, row by row, for drawing its lines of equal time through the images. */
export function arrivalTimeSurface(model: LensModel, source: SkyVector, grid: SkyGrid): Float64Array {
  const surface = new Float64Array(grid.columns * grid.rows)
  for (let row = 0; row < grid.rows; row++) {
    for (let column = 0; column < grid.columns; column++) {
      const at = { east: grid.east - column * grid.stepArcsec, north: grid.north - row * grid.stepArcsec }
      surface[row * grid.columns + column] = arrivalTimeArcsec2(model, source, at)
    }
  }
  return surface
}
