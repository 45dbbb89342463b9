/** Points that a person clicked along an arc, and what can be wrong with them. */
import type { SkyVector } from './sis'

export interface ClickedPoints {
  /** offsets on the sky in arcsec; a circle in pixels that are not square, or not on the sky, measures wrongly */
  points: readonly SkyVector[]
  /** how well a click can be placed, 1 sigma on each axis, arcsec; half a pixel is usual */
  clickErrorArcsec: number
}

/** Points that no curve can be fitted to. The message is a sentence that says what to do. */
export class ArcFitError extends Error {
  readonly name = 'ArcFitError'
}

/** @throws ArcFitError for too few points, points that are not finite, or too few different ones. */
export function checkPoints(points: readonly SkyVector[], clickErrorArcsec: number, least: number, what: string): void {
  if (!(clickErrorArcsec > 0 && Number.isFinite(clickErrorArcsec))) {
    throw new ArcFitError(`The error of a click must be a number of arcsec above 0; ${clickErrorArcsec} is not.`)
  }
  const bad = points.findIndex(({ east, north }) => !Number.isFinite(east) || !Number.isFinite(north))
  if (bad >= 0) throw new ArcFitError(`Point ${bad + 1} is not a pair of finite numbers.`)
  const different = new Set(points.map(({ east, north }) => `${east} ${north}`)).size
  const needs = `${what} needs at least ${least} ${least === 1 ? 'point' : 'different points'}`
  if (points.length < least) {
    throw new ArcFitError(
      `${needs} and there ${points.length === 1 ? 'is' : 'are'} ${points.length}; click more along the arc.`,
    )
  }
  if (different < least) {
    throw new ArcFitError(
      `${needs} and only ${different} of these ${points.length} differ; click further along the arc.`,
    )
  }
}

/** Root mean square distance from the mean place, and from the straight line that fits best. */
export function scatterOf(points: readonly SkyVector[]): { size: number; offLine: number } {
  const n = points.length
  const east = points.reduce((sum, point) => sum + point.east, 0) / n
  const north = points.reduce((sum, point) => sum + point.north, 0) / n
  let [xx, xy, yy] = [0, 0, 0]
  for (const point of points) {
    const [x, y] = [point.east - east, point.north - north]
    xx += (x * x) / n
    xy += (x * y) / n
    yy += (y * y) / n
  }
  const smaller = (xx + yy - Math.hypot(xx - yy, 2 * xy)) / 2
  return { size: Math.sqrt(xx + yy), offLine: Math.sqrt(Math.max(0, smaller)) }
}

/** The angle round a centre that holds all points: 360 degrees less the widest gap between neighbours. */
export function spanDeg(points: readonly SkyVector[], centre: SkyVector): number {
  const angles = points
    .map(({ east, north }) => (Math.atan2(east - centre.east, north - centre.north) * 180) / Math.PI)
    .sort((a, b) => a - b)
  const gaps = angles.map((angle, k) => (k === 0 ? angle + 360 - angles[angles.length - 1] : angle - angles[k - 1]))
  return 360 - Math.max(...gaps)
}
