/**
 * Nonlinear least squares by K. Levenberg and D. Marquardt, with H. B. Nielsen's damping rule.
 * Source: K. Madsen, H. B. Nielsen & O. Tingleff, "Methods for Non-Linear Least Squares Problems", 2nd ed. (DTU, 2004),
 * algorithm 3.16. Derivatives by central differences. Written for problems of a few parameters whose residuals come all at once
 * from one evaluation of a model, as a lens with its images is.
 */

export interface LeastSquaresFit {
  parameters: number[]
  residuals: number[]
  /** sum of squared residuals */
  sum: number
  /** (J^T J)^-1: times the variance of a residual it is the covariance of the parameters; null when J^T J cannot be inverted */
  unitCovariance: number[][] | null
  converged: boolean
  evaluations: number
}

export interface LeastSquaresOptions {
  /** size of a meaningful step of each parameter, for the differences */
  steps: readonly number[]
  maximumRounds?: number
}

/**
 * Smallest sum of squares near a start.
 * @param residualsOf a function of the parameters with always as many residuals; one that is not finite refuses the step.
 */
export function leastSquares(
  residualsOf: (parameters: readonly number[]) => number[],
  start: readonly number[],
  { steps, maximumRounds = 200 }: LeastSquaresOptions,
): LeastSquaresFit {
  let evaluations = 0
  // Inside, each parameter is counted in its own step, so that damping means the same for all of them.
  const evaluate = (scaled: readonly number[]) => {
    evaluations++
    return residualsOf(scaled.map((value, k) => value * steps[k]))
  }
  let place = start.map((value, k) => value / steps[k])
  let residuals = evaluate(place)
  let sum = sumOfSquares(residuals)
  let converged = false
  let growth = 2
  let normal = normalEquations(evaluate, place, residuals)
  let damping = 1e-3 * Math.max(...normal.matrix.map((row, k) => row[k]), Number.MIN_VALUE)
  for (let round = 0; round < maximumRounds && !converged && Number.isFinite(damping); round++) {
    const damped = normal.matrix.map((row, k) => row.map((value, j) => (k === j ? value + damping : value)))
    const step = solveSymmetric(damped, normal.slope)
    const tried = step === null ? place : place.map((value, k) => value + step[k])
    const triedResiduals = step === null ? residuals : evaluate(tried)
    const triedSum = sumOfSquares(triedResiduals)
    if (step === null || triedSum > sum) {
      converged = step !== null && largest(step) < 1e-10
      damping *= growth
      growth *= 2
      continue
    }
    const foreseen = step.reduce((total, value, k) => total + value * (damping * value + normal.slope[k]), 0)
    const gain = foreseen > 0 ? (sum - triedSum) / foreseen : 1
    converged = largest(step) < 1e-10 || (sum - triedSum <= 1e-15 * sum && largest(step) < 1e-6)
    place = tried
    residuals = triedResiduals
    sum = triedSum
    normal = normalEquations(evaluate, place, residuals)
    damping *= Math.max(1 / 3, 1 - (2 * Math.min(1, gain) - 1) ** 3)
    growth = 2
  }
  const covariance = invertSymmetric(normal.matrix)
  return {
    parameters: place.map((value, k) => value * steps[k]),
    residuals,
    sum,
    unitCovariance: covariance?.map((row, i) => row.map((value, j) => value * steps[i] * steps[j])) ?? null,
    converged,
    evaluations,
  }
}

function largest(step: readonly number[]): number {
  return Math.max(...step.map(Math.abs))
}

function sumOfSquares(values: readonly number[]): number {
  let sum = 0
  for (const value of values) sum += value * value
  return Number.isNaN(sum) ? Number.POSITIVE_INFINITY : sum
}

interface NormalEquations {
  matrix: number[][]
  /** -J^T r, the downhill direction */
  slope: number[]
}

function normalEquations(
  evaluate: (parameters: readonly number[]) => number[],
  parameters: readonly number[],
  residuals: readonly number[],
): NormalEquations {
  // Central differences are best near the cube root of the rounding error.
  const h = 6e-6
  const columns = parameters.map((value, k) => {
    const shifted = (by: number) => evaluate(parameters.map((other, j) => (j === k ? value + by : other)))
    const [above, below] = [shifted(h), shifted(-h)]
    return residuals.map((_, i) => {
      const slope = (above[i] - below[i]) / (2 * h)
      return Number.isFinite(slope) ? slope : 0
    })
  })
  const product = (a: readonly number[], b: readonly number[]) => a.reduce((total, value, k) => total + value * b[k], 0)
  return {
    matrix: columns.map((a) => columns.map((b) => product(a, b))),
    slope: columns.map((column) => -product(column, residuals)),
  }
}

/** Cholesky factor of a symmetric matrix, scaled by its diagonal; null when it is not positive definite to 14 digits. */
function factor(matrix: readonly (readonly number[])[]): { lower: number[][]; scale: number[] } | null {
  const scale = matrix.map((row, k) => Math.sqrt(row[k]))
  if (scale.some((value) => !(value > 0) || !Number.isFinite(value))) return null
  const lower = matrix.map((row) => row.map(() => 0))
  for (let i = 0; i < matrix.length; i++) {
    for (let j = 0; j <= i; j++) {
      let rest = matrix[i][j] / (scale[i] * scale[j])
      for (let k = 0; k < j; k++) rest -= lower[i][k] * lower[j][k]
      if (i > j) lower[i][j] = rest / lower[j][j]
      else if (rest > 1e-14) lower[i][i] = Math.sqrt(rest)
      else return null
    }
  }
  return { lower, scale }
}

/** x with matrix x = right; null when the matrix is not positive definite. */
export function solveSymmetric(matrix: readonly (readonly number[])[], right: readonly number[]): number[] | null {
  const factored = factor(matrix)
  if (factored === null) return null
  const { lower, scale } = factored
  const x = right.map((value, k) => value / scale[k])
  for (let i = 0; i < x.length; i++) {
    for (let k = 0; k < i; k++) x[i] -= lower[i][k] * x[k]
    x[i] /= lower[i][i]
  }
  for (let i = x.length - 1; i >= 0; i--) {
    for (let k = i + 1; k < x.length; k++) x[i] -= lower[k][i] * x[k]
    x[i] /= lower[i][i]
  }
  return x.map((value, k) => value / scale[k])
}

/** Inverse of a symmetric matrix; null when it is not positive definite. */
export function invertSymmetric(matrix: readonly (readonly number[])[]): number[][] | null {
  const columns = matrix.map((_, k) =>
    solveSymmetric(
      matrix,
      matrix.map((__, j) => (j === k ? 1 : 0)),
    ),
  )
  return columns.every((column) => column !== null) ? columns : null
}
