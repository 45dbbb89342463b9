/**
 * A circle fitted to points that a person clicked along an arc: its radius is the Einstein radius to a few per cent
 * (C. Kochanek, arXiv:astro-ph/0407232, section B.5; section from memory).
 *
 * Geometric: the sum of squared distances from the circle is smallest (W. Gander, G. Golub & R. Strebel, BIT 34, 558 (1994)).
 * The start is algebraic, by G. Taubin (IEEE Trans. PAMI 13, 1115 (1991)), which short arcs bias less than I. Kasa's
 * (IEEE Trans. Instrum. Meas. 25, 8 (1976)); both as in N. Chernov, "Circular and Linear Regression" (2010), sections 5.1 and 5.9.
 */
import { leastSquares } from './least-squares'
import { ArcFitError, checkPoints, scatterOf, spanDeg, type ClickedPoints } from './clicked-points'
import type { SkyVector } from './sis'

export interface CircleFit {
  centre: SkyVector
  radiusArcsec: number
  /** 1 sigma */
  radiusErrorArcsec: number
  /** 1 sigma of the centre on each axis; 0 for one that was held */
  centreErrorArcsec: SkyVector
  /** root mean square of the distances from the circle */
  residualArcsec: number
  /** of each point, positive outside */
  residualsArcsec: number[]
  /** points less unknowns; with 0 the circle passes through the points and the errors rest on the click error alone */
  degreesOfFreedom: number
  /** how much of the circle the points span seen from its centre, degrees */
  spanDeg: number
  notes: string[]
}

/**
 * @param centre of the lens, when it is to be held: then one point is enough and the radius is the mean distance.
 * @throws ArcFitError when the points cannot give a circle: fewer than 3 (1 with a held centre), equal, or on a straight line.
 */
export function fitCircle({ points, clickErrorArcsec }: ClickedPoints, centre?: SkyVector): CircleFit {
  checkPoints(points, clickErrorArcsec, centre ? 1 : 3, 'A circle')
  const scale = scatterOf(points).size || 1
  const start = centre ? { centre, radius: 0 } : taubinCircle(points)
  if (start === null || start.radius > 1e3 * scale) throw new ArcFitError(STRAIGHT)
  const meanRadius = points.reduce((sum, point) => sum + distance(point, start.centre), 0) / points.length
  const held = centre !== undefined
  const placed = (parameters: readonly number[]): SkyVector =>
    held ? start.centre : { east: parameters[1], north: parameters[2] }
  const residuals = (parameters: readonly number[]) =>
    points.map((point) => distance(point, placed(parameters)) - parameters[0])
  const first = held ? [meanRadius] : [meanRadius, start.centre.east, start.centre.north]
  const fit = leastSquares(residuals, first, { steps: first.map(() => scale) })
  const radiusArcsec = fit.parameters[0]
  if (fit.unitCovariance === null || !(radiusArcsec > 0) || radiusArcsec > 1e3 * scale) throw new ArcFitError(STRAIGHT)
  const degreesOfFreedom = points.length - first.length
  const variance = varianceOf(fit.sum, degreesOfFreedom, clickErrorArcsec)
  const error = (k: number) => Math.sqrt(variance * (fit.unitCovariance?.[k]?.[k] ?? 0))
  const span = spanDeg(points, placed(fit.parameters))
  return {
    centre: placed(fit.parameters),
    radiusArcsec,
    radiusErrorArcsec: error(0),
    centreErrorArcsec: { east: error(1), north: error(2) },
    residualArcsec: Math.sqrt(fit.sum / points.length),
    residualsArcsec: fit.residuals,
    degreesOfFreedom,
    spanDeg: span,
    notes: notesOn(degreesOfFreedom, span, held),
  }
}

const STRAIGHT =
  'The points lie on a straight line to within the width of a click, so that no circle is better than another; click further along the arc.'

/** The larger of what clicks scatter by and what these points do: a few points can lie close to the curve by chance. */
export function varianceOf(sum: number, degreesOfFreedom: number, clickErrorArcsec: number): number {
  const observed = degreesOfFreedom > 0 ? sum / degreesOfFreedom : 0
  return Math.max(observed, clickErrorArcsec ** 2)
}

function notesOn(degreesOfFreedom: number, span: number, held: boolean): string[] {
  const notes: string[] = []
  if (degreesOfFreedom === 0) notes.push('As many unknowns as points: the circle passes through them by construction.')
  if (!held && span < 90) {
    notes.push(
      `The points span ${Math.round(span)}° of the circle: radius and centre are hard to tell apart on so short an arc.`,
    )
  }
  return notes
}

function distance(a: SkyVector, b: SkyVector): number {
  return Math.hypot(a.east - b.east, a.north - b.north)
}

export interface PlainCircle {
  centre: SkyVector
  radius: number
}

/** Kasa's circle: the linear least squares of x^2 + y^2 = 2 a x + 2 b y + c. Null for points on a line. */
export function kasaCircle(points: readonly SkyVector[]): PlainCircle | null {
  const moments = momentsOf(points)
  const { xx, xy, yy, xz, yz, zz: mean } = moments
  const determinant = xx * yy - xy * xy
  if (!(determinant > 1e-12 * (xx + yy) ** 2)) return null
  const east = (xz * yy - yz * xy) / determinant / 2
  const north = (yz * xx - xz * xy) / determinant / 2
  return {
    centre: { east: east + moments.east, north: north + moments.north },
    radius: Math.sqrt(east * east + north * north + mean),
  }
}

/** Taubin's circle, by Newton's method on its characteristic polynomial from 0. Null for points on a line. */
export function taubinCircle(points: readonly SkyVector[]): PlainCircle | null {
  const { east, north, xx, xy, yy, xz, yz, zz: mz, fourth } = momentsOf(points)
  const covariance = xx * yy - xy * xy
  if (!(covariance > 1e-12 * (xx + yy) ** 2)) return null
  const spread = fourth - mz * mz
  const a3 = 4 * mz
  const a2 = -3 * mz * mz - fourth
  const a1 = spread * mz + 4 * covariance * mz - xz * xz - yz * yz
  const a0 = xz * (xz * yy - yz * xy) + yz * (yz * xx - xz * xy) - spread * covariance
  let root = 0
  let value = a0
  for (let round = 0; round < 99; round++) {
    const slope = a1 + root * (2 * a2 + 3 * a3 * root)
    const next = root - value / slope
    const valueThere = a0 + next * (a1 + next * (a2 + next * a3))
    if (next === root || !Number.isFinite(next) || Math.abs(valueThere) >= Math.abs(value)) break
    root = next
    value = valueThere
  }
  const determinant = root * root - root * mz + covariance
  const x = (xz * (yy - root) - yz * xy) / determinant / 2
  const y = (yz * (xx - root) - xz * xy) / determinant / 2
  const radius = Math.sqrt(x * x + y * y + mz)
  return Number.isFinite(radius) ? { centre: { east: x + east, north: y + north }, radius } : null
}

/** Mean place, and means of products of offsets from it with z = x^2 + y^2. */
function momentsOf(points: readonly SkyVector[]) {
  const n = points.length
  const mean = (of: (point: SkyVector) => number) => points.reduce((sum, point) => sum + of(point), 0) / n
  const east = mean((point) => point.east)
  const north = mean((point) => point.north)
  const about = (of: (x: number, y: number, z: number) => number) =>
    mean((point) => {
      const [x, y] = [point.east - east, point.north - north]
      return of(x, y, x * x + y * y)
    })
  return {
    east,
    north,
    xx: about((x) => x * x),
    xy: about((x, y) => x * y),
    yy: about((_, y) => y * y),
    xz: about((x, _, z) => x * z),
    yz: about((_, y, z) => y * z),
    zz: about((_, __, z) => z),
    fourth: about((_, __, z) => z * z),
  }
}
