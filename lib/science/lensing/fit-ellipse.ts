/**
 * An ellipse fitted to points clicked along an arc or ring; sqrt(a b) is the circularised Einstein radius.
 *
 * Geometric: the sum of squared distances from the ellipse is smallest (W. Gander, G. Golub & R. Strebel, BIT 34, 558 (1994)).
 * The start is the direct fit of an ellipse by A. Fitzgibbon, M. Pilu & R. Fisher (IEEE Trans. PAMI 21, 476 (1999)) in the stable
 * form of R. Halir & J. Flusser (WSCG 1998).
 */
import { ArcFitError, checkPoints, scatterOf, spanDeg, type ClickedPoints } from './clicked-points'
import { directEllipse, type PlainEllipse } from './direct-ellipse'
import { signedDistance } from './ellipse-distance'
import { fitCircle, varianceOf } from './fit-circle'
import { leastSquares, type LeastSquaresFit } from './least-squares'
import type { SkyVector } from './sis'

export interface EllipseFit {
  centre: SkyVector
  semiMajorArcsec: number
  semiMinorArcsec: number
  /** of the major axis, degrees from north through east, 0 to below 180 */
  positionAngleDeg: number
  /** sqrt(a b), with its 1 sigma */
  radiusArcsec: number
  radiusErrorArcsec: number
  semiMajorErrorArcsec: number
  semiMinorErrorArcsec: number
  /** null where the ellipse is round to within the errors and has no direction */
  positionAngleErrorDeg: number | null
  residualArcsec: number
  /** of each point, positive outside */
  residualsArcsec: number[]
  degreesOfFreedom: number
  spanDeg: number
  notes: string[]
}

/** @throws ArcFitError for fewer than 5 different points, points on a line, and points that lie on no ellipse. */
export function fitEllipse({ points, clickErrorArcsec }: ClickedPoints): EllipseFit {
  checkPoints(points, clickErrorArcsec, 5, 'An ellipse')
  const { size } = scatterOf(points)
  const starts = startingEllipses({ points, clickErrorArcsec })
  // Size and the two components of shape on twice the angle have no seam where the ellipse is round.
  const steps = [size, size, 1, 1, 1]
  const residuals = (parameters: readonly number[]) => {
    const ellipse = ellipseOf(parameters)
    return points.map((point) => signedDistance(ellipse, point))
  }
  const fits = starts.map((start) => leastSquares(residuals, parametersOf(start), { steps }))
  const fit = fits.sort((a, b) => a.sum - b.sum)[0]
  if (!fit || fit.unitCovariance === null) throw new ArcFitError(NO_ELLIPSE)
  const ellipse = ellipseOf(fit.parameters)
  if (!(ellipse.semiMajor < 1e3 * size && ellipse.semiMinor > 1e-6 * size)) throw new ArcFitError(NO_ELLIPSE)
  return describeEllipse({ points, clickErrorArcsec }, fit, fit.unitCovariance)
}

const NO_ELLIPSE =
  'The points lie on no ellipse: the best one has no end or no width. Click further round the ring, or fit a circle.'

function startingEllipses(clicked: ClickedPoints): PlainEllipse[] {
  const direct = directEllipse(clicked.points)
  try {
    const { centre, radiusArcsec } = fitCircle(clicked)
    const round = { centre, semiMajor: 1.05 * radiusArcsec, semiMinor: radiusArcsec, positionAngleDeg: 45 }
    return direct ? [direct, round] : [round]
  } catch (refusal) {
    if (!direct) throw refusal
    return [direct]
  }
}

/** East, north, ln sqrt(a b), and ln(a / b) times cosine and sine of twice the position angle. */
function parametersOf({ centre, semiMajor, semiMinor, positionAngleDeg }: PlainEllipse): number[] {
  const stretch = Math.log(semiMajor / semiMinor)
  const twice = (positionAngleDeg * Math.PI) / 90
  const size = Math.log(semiMajor * semiMinor) / 2
  return [centre.east, centre.north, size, stretch * Math.cos(twice), stretch * Math.sin(twice)]
}

function ellipseOf([east, north, logSize, cosine, sine]: readonly number[]): PlainEllipse {
  const half = Math.hypot(cosine, sine) / 2
  const angle = (Math.atan2(sine, cosine) * 90) / Math.PI
  return {
    centre: { east, north },
    semiMajor: Math.exp(logSize + half),
    semiMinor: Math.exp(logSize - half),
    positionAngleDeg: (angle + 180) % 180,
  }
}

function describeEllipse(clicked: ClickedPoints, fit: LeastSquaresFit, unitCovariance: number[][]): EllipseFit {
  const { points, clickErrorArcsec } = clicked
  const { centre, semiMajor, semiMinor, positionAngleDeg } = ellipseOf(fit.parameters)
  const degreesOfFreedom = points.length - 5
  const variance = varianceOf(fit.sum, degreesOfFreedom, clickErrorArcsec)
  const covariance = unitCovariance.map((row) => row.map((value) => value * variance))
  const [, , , cosine, sine] = fit.parameters
  const stretch = Math.hypot(cosine, sine)
  // Slopes of ln a and ln b on (size, cosine, sine), and of the angle on (cosine, sine).
  const toward = stretch === 0 ? [Math.SQRT1_2, Math.SQRT1_2] : [cosine / stretch, sine / stretch]
  const spread = (weights: readonly number[]) => {
    const terms = weights.flatMap((a, i) => weights.map((b, j) => a * b * covariance[i + 2][j + 2]))
    return Math.sqrt(
      Math.max(
        0,
        terms.reduce((sum, term) => sum + term, 0),
      ),
    )
  }
  const alongError = spread([0, toward[0], toward[1]])
  const acrossError = spread([0, -toward[1], toward[0]])
  const radiusArcsec = Math.sqrt(semiMajor * semiMinor)
  const span = spanDeg(points, centre)
  const notes: string[] = []
  if (degreesOfFreedom === 0) notes.push('As many unknowns as points: the ellipse passes through them by construction.')
  if (span < 180) {
    notes.push(
      `The points span ${Math.round(span)}° of the ellipse: less than half of it seldom fixes its shape; compare a circle.`,
    )
  }
  return {
    centre,
    semiMajorArcsec: semiMajor,
    semiMinorArcsec: semiMinor,
    positionAngleDeg,
    radiusArcsec,
    radiusErrorArcsec: radiusArcsec * spread([1, 0, 0]),
    semiMajorErrorArcsec: semiMajor * spread([1, toward[0] / 2, toward[1] / 2]),
    semiMinorErrorArcsec: semiMinor * spread([1, -toward[0] / 2, -toward[1] / 2]),
    positionAngleErrorDeg: stretch > alongError ? (acrossError / stretch / 2) * (180 / Math.PI) : null,
    residualArcsec: Math.sqrt(fit.sum / points.length),
    residualsArcsec: fit.residuals,
    degreesOfFreedom,
    spanDeg: span,
    notes,
  }
}
