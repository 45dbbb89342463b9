/**
 * A singular isothermal ellipsoid with shear fitted to places clicked on a stamp.
 *
 * Images of one point (two or four of a quasar): each gives two numbers; the model's own images are compared with them on the sky.
 * Points along an arc: a point moved along the arc is still on the arc, so each gives one number, its distance from the ridge of
 * the arc in the direction seen from the lens, where the ridge is where the line of sight passes nearest the source.
 * With fewer numbers than unknowns nothing is determined and the fit is refused; with as many, the model passes through the
 * clicks by construction and its residual says nothing about the lens, which the answer says.
 * The start and the first rounds compare in the source plane, each offset carried to the sky by the magnification matrix:
 * C. Keeton, arXiv:astro-ph/0102340 (from memory).
 */
import { leastSquares, type LeastSquaresFit } from './least-squares'
import { arcResiduals, imageResiduals, linearResiduals, pairImages } from './fit-sie-residuals'
import {
  FREE_PARAMETERS,
  lensOf,
  parametersOf,
  startsFor,
  stepsFor,
  unknownsOf,
  type FittedParameter,
  type HeldLens,
  type LensAndSource,
  type LensKind,
} from './fit-sie-parameters'
import { lensModel, type PointImage, type ShearedLens } from './sie-shear'
import { pointImages } from './sie-shear-images'
import type { SkyVector } from './sis'

export interface FitRequest {
  /** two or more images of one point, or points along one arc, arcsec from the origin of the stamp */
  points: readonly SkyVector[]
  pointsAre: 'images' | 'arc'
  /** sphere (radius), ellipsoid (radius, axis ratio, angle), sheared sphere (radius, shear, angle), or all of them */
  kind: LensKind
  /** the place of the lens, since the light of a galaxy shows it better than its images do, and what else is not to be fitted */
  held: HeldLens
  /** how well a click can be placed, 1 sigma on each axis, arcsec; half a pixel is usual */
  clickErrorArcsec: number
  pixelScaleArcsec: number
  /** where the search begins and nowhere else, as from a fit made before; all round when left out */
  start?: LensAndSource
}

export interface SieFit {
  lens: ShearedLens
  source: SkyVector
  parameters: FittedParameter[]
  /** numbers that the clicks give, numbers that the model may choose, and their difference */
  constraints: number
  unknowns: number
  degreesOfFreedom: number
  /** root mean square over the points of the distance on the sky */
  residualArcsec: number
  residualPixels: number
  /** of each point in the order given; Infinity where the model has no image for it */
  residualsArcsec: number[]
  /** sum of (distance / click error)^2; about the degrees of freedom for a model that fits */
  chiSquared: number
  /** the model's own images; empty for an arc */
  images: PointImage[]
  converged: boolean
  /** sentences for whoever reads the numbers */
  notes: string[]
}

/** A request that no fit can answer. The message is a sentence that says what to do. */
export class FitRefusedError extends Error {
  readonly name = 'FitRefusedError'
}

/** @throws FitRefusedError for too few, equal or unusable points, and for a click error or scale that is not above 0. */
export function fitSie(request: FitRequest): SieFit {
  const constraints = checkRequest(request)
  const { points, pointsAre, kind, held, clickErrorArcsec } = request
  const steps = stepsFor(kind, points, held.centre)
  const isArc = pointsAre === 'arc'
  const first = isArc ? arcResiduals : linearResiduals
  const start = (parameters: readonly number[]) => first(lensOf(kind, parameters, held), points)
  const starts = request.start ? [unknownsOf(kind, request.start, held)] : startsFor(kind, points, held.centre)
  const guesses = starts
    .map((guess) => leastSquares(start, guess, { steps, maximumRounds: 60 }))
    .sort((a, b) => a.sum - b.sum)
  let best = guesses[0]
  if (!isArc) {
    const onSky = (parameters: readonly number[]) => imageResiduals(lensOf(kind, parameters, held), points)
    const goodEnough = constraints * clickErrorArcsec ** 2
    best = leastSquares(onSky, guesses[0].parameters, { steps })
    // A start that is best to first order may not be on the sky.
    for (const guess of guesses.slice(1, 4)) {
      if (best.sum <= goodEnough) break
      const other = leastSquares(onSky, guess.parameters, { steps })
      if (other.sum < best.sum) best = other
    }
  }
  return describeFit(request, best, constraints)
}

function checkRequest({ points, pointsAre, kind, held, clickErrorArcsec, pixelScaleArcsec }: FitRequest): number {
  const { centre } = held
  const refuse = (sentence: string): never => {
    throw new FitRefusedError(sentence)
  }
  if (!(clickErrorArcsec > 0 && pixelScaleArcsec > 0))
    refuse('The error of a click and the pixel scale must be above 0.')
  if ([...points, centre].some(({ east, north }) => !Number.isFinite(east) || !Number.isFinite(north))) {
    refuse('A point or the place of the lens is not a pair of finite numbers.')
  }
  for (const [k, point] of points.entries()) {
    if (points.slice(0, k).some((other) => apart(point, other) < 1e-9)) {
      refuse(`Point ${k + 1} was clicked twice in the same place; take one of them away.`)
    }
    if (apart(point, centre) < 1e-9)
      refuse(`Point ${k + 1} lies on the lens itself; a lens of this kind has no image there.`)
  }
  const constraints = points.length * (pointsAre === 'images' ? 2 : 1)
  const unknowns = FREE_PARAMETERS[kind]
  const each = pointsAre === 'images' ? 'each image gives two' : 'each point on an arc gives one'
  if (constraints < unknowns) {
    const advice =
      pointsAre === 'images' && points.length >= 2 && kind !== 'sphere'
        ? 'Two images cannot fix ellipticity or shear: fit a round lens, or add the other images.'
        : 'Click more of them.'
    const count = `${points.length} ${points.length === 1 ? 'point gives' : 'points give'} ${constraints} numbers (${each})`
    refuse(`${count} and this lens has ${unknowns} unknowns. ${advice}`)
  }
  return constraints
}

function apart(a: SkyVector, b: SkyVector): number {
  return Math.hypot(a.east - b.east, a.north - b.north)
}

function describeFit(request: FitRequest, fit: LeastSquaresFit, constraints: number): SieFit {
  const { points, pointsAre, kind, held, clickErrorArcsec, pixelScaleArcsec } = request
  const unknowns = fit.parameters.length
  const degreesOfFreedom = constraints - unknowns
  const { lens, source } = lensOf(kind, fit.parameters, held)
  const images = pointsAre === 'images' ? pointImages(lensModel(lens), source) : []
  const residualsArcsec =
    pointsAre === 'images'
      ? pairImages(points, images).map((image, k) =>
          image === null ? Number.POSITIVE_INFINITY : apart(image, points[k]),
        )
      : fit.residuals.map(Math.abs)
  const squares = residualsArcsec.reduce((sum, value) => sum + value * value, 0)
  const residualArcsec = Math.sqrt(squares / points.length)
  const chiSquared = squares / clickErrorArcsec ** 2
  // With a model that does not fit, the scatter itself says how far the parameters may be off.
  const excess = degreesOfFreedom > 0 && Number.isFinite(chiSquared) ? Math.max(1, chiSquared / degreesOfFreedom) : 1
  const covariance =
    fit.unitCovariance?.map((row) => row.map((value) => value * clickErrorArcsec ** 2 * excess)) ?? null
  return {
    lens,
    source,
    parameters: parametersOf(kind, fit.parameters, covariance, held),
    constraints,
    unknowns,
    degreesOfFreedom,
    residualArcsec,
    residualPixels: residualArcsec / pixelScaleArcsec,
    residualsArcsec,
    chiSquared,
    images,
    converged: fit.converged,
    notes: notesOn({ request, degreesOfFreedom, chiSquared, images, lens, covariance, converged: fit.converged }),
  }
}

interface Outcome {
  request: FitRequest
  degreesOfFreedom: number
  chiSquared: number
  images: readonly PointImage[]
  lens: ShearedLens
  covariance: number[][] | null
  converged: boolean
}

function notesOn({ request, degreesOfFreedom, chiSquared, images, lens, covariance, converged }: Outcome): string[] {
  const { points, pointsAre } = request
  const notes: string[] = []
  if (degreesOfFreedom === 0) {
    notes.push(
      'As many unknowns as numbers: the model passes through the points by construction, so a small residual is no evidence.',
    )
  }
  // The logarithm of the radius is the first unknown: its error is the radius's part.
  if (covariance !== null && Math.sqrt(covariance[0][0]) > 0.3) {
    notes.push(
      'The points do not fix so many unknowns: the radius is uncertain by more than 30 %. Fit a round lens, or click more.',
    )
  }
  if (covariance === null) notes.push('The points leave some parameter free: their uncertainties are not given.')
  if (!converged) notes.push('The search ended before it settled; move the lens or the points and fit again.')
  // A model that fits exceeds this in 0.3 % of cases with one degree of freedom (9), and in fewer with more.
  if (degreesOfFreedom > 0 && chiSquared > 3 * degreesOfFreedom + 6) {
    notes.push('The points lie further from the model than clicks do: this lens, with this centre, does not make them.')
  }
  if (pointsAre === 'images' && images.length < points.length) {
    notes.push(`The model makes ${images.length} of the ${points.length} images.`)
  }
  if (pointsAre === 'images' && images.length > points.length) {
    const faintest = Math.min(...images.map(({ magnification }) => Math.abs(magnification)))
    const more = images.length - points.length
    notes.push(
      `The model makes ${more} ${more === 1 ? 'image' : 'images'} more than were clicked; the faintest is magnified ${faintest.toFixed(1)} times.`,
    )
  }
  if (lens.axisRatio < 0.3) notes.push('The axis ratio is below 0.3, thinner than the mass of galaxies is found to be.')
  if ((lens.shear?.strength ?? 0) > 0.3)
    notes.push('The shear is above 0.3, more than a group of galaxies usually gives.')
  return notes
}
