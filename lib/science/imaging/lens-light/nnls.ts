/**
 * Least squares with coefficients that are not negative, min |A x - b| with x >= 0, from the normal equations.
 * Source: C. Lawson & R. Hanson, Solving Least Squares Problems (1974), chapter 23, algorithm NNLS.
 */

/**
 * @param gram A^T A, size x size, row by row, symmetric and not negative definite.
 * @param moment A^T b.
 * @returns x; all 0 when nothing can be gained. Never throws.
 */
export function nonNegativeLeastSquares(gram: Float64Array, moment: Float64Array): Float64Array {
  const size = moment.length
  const x = new Float64Array(size)
  const passive: number[] = []
  const tolerance = 1e-10 * moment.reduce((largest, value) => Math.max(largest, Math.abs(value)), 0)
  const tried = new Uint8Array(size)
  for (let round = 0; round < 3 * size; round++) {
    const entering = steepest(gram, moment, x, passive, tried, tolerance)
    if (entering < 0) break
    passive.push(entering)
    tried[entering] = 1
    for (;;) {
      const solution = solvePositive(gram, moment, passive)
      if (solution === null) {
        passive.splice(passive.indexOf(entering), 1)
        x[entering] = 0
        break
      }
      if (solution.every((value) => value > 0)) {
        x.fill(0)
        passive.forEach((index, k) => (x[index] = solution[k]))
        // A column that was refused may be useful now that the others have moved.
        tried.fill(0)
        break
      }
      const limit = shortestStep(x, solution, passive)
      passive.forEach((index, k) => (x[index] += limit.step * (solution[k] - x[index])))
      x[passive[limit.at]] = 0
      for (let k = passive.length - 1; k >= 0; k--) if (!(x[passive[k]] > 0)) x[passive.splice(k, 1)[0]] = 0
      if (passive.length === 0) break
    }
  }
  return x
}

function steepest(
  gram: Float64Array,
  moment: Float64Array,
  x: Float64Array,
  passive: number[],
  tried: Uint8Array,
  tolerance: number,
): number {
  const size = moment.length
  let best = -1
  let bestGain = tolerance
  for (let i = 0; i < size; i++) {
    if (tried[i] === 1 || passive.includes(i) || !(gram[i * size + i] > 0)) continue
    let gradient = moment[i]
    for (const j of passive) gradient -= gram[i * size + j] * x[j]
    if (gradient > bestGain) {
      best = i
      bestGain = gradient
    }
  }
  return best
}

/** How far x may go towards the solution before the first coefficient reaches 0, and which one that is. */
function shortestStep(x: Float64Array, solution: Float64Array, passive: number[]): { step: number; at: number } {
  let step = 1
  let at = 0
  passive.forEach((index, k) => {
    if (solution[k] > 0) return
    const share = x[index] > 0 ? x[index] / (x[index] - solution[k]) : 0
    if (share > step) return
    step = share
    at = k
  })
  return { step, at }
}

function solvePositive(gram: Float64Array, moment: Float64Array, passive: number[]): Float64Array | null {
  const count = passive.length
  const size = moment.length
  const matrix = new Float64Array(count * count)
  const right = new Float64Array(count)
  for (let i = 0; i < count; i++) {
    right[i] = moment[passive[i]]
    for (let j = 0; j < count; j++) matrix[i * count + j] = gram[passive[i] * size + passive[j]]
  }
  return solveSymmetric(matrix, right)
}

/** Cholesky's solution of a positive definite system, row by row; null when it is not positive definite. In place. */
export function solveSymmetric(matrix: Float64Array, right: Float64Array): Float64Array | null {
  const size = right.length
  for (let i = 0; i < size; i++) {
    for (let j = 0; j <= i; j++) {
      let sum = matrix[i * size + j]
      for (let k = 0; k < j; k++) sum -= matrix[i * size + k] * matrix[j * size + k]
      if (i === j) {
        if (!(sum > 1e-12 * matrix[i * size + i])) return null
        matrix[i * size + i] = Math.sqrt(sum)
      } else matrix[i * size + j] = sum / matrix[j * size + j]
    }
  }
  for (let i = 0; i < size; i++) {
    for (let k = 0; k < i; k++) right[i] -= matrix[i * size + k] * right[k]
    right[i] /= matrix[i * size + i]
  }
  for (let i = size - 1; i >= 0; i--) {
    for (let k = i + 1; k < size; k++) right[i] -= matrix[k * size + i] * right[k]
    right[i] /= matrix[i * size + i]
  }
  return right
}
