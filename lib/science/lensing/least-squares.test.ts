import { describe, expect, it } from 'vitest'
import { invertSymmetric, leastSquares, solveSymmetric } from './least-squares'

describe('least squares', () => {
  // NIST Statistical Reference Datasets, nonlinear regression, Misra1a: data and certified values to 11 digits
  // (itl.nist.gov/div898/strd/nls/data/misra1a.shtml), from both of its starts.
  const x = [77.6, 114.9, 141.1, 190.8, 239.9, 289, 332.8, 378.4, 434.8, 477.3, 536.8, 593.1, 689.1, 760]
  const y = [10.07, 14.73, 17.94, 23.93, 29.61, 35.18, 40.02, 44.82, 50.76, 55.05, 61.01, 66.4, 75.47, 81.78]
  const residuals = ([b1, b2]: readonly number[]) => x.map((value, k) => y[k] - b1 * (1 - Math.exp(-b2 * value)))

  it.each([
    [500, 0.0001],
    [250, 0.0005],
  ])('finds the certified values of Misra1a from %f and %f', (b1, b2) => {
    const fit = leastSquares(residuals, [b1, b2], { steps: [100, 1e-4] })
    expect(fit.converged).toBe(true)
    expect(fit.parameters[0]).toBeCloseTo(238.94212918, 4)
    expect(fit.parameters[1] * 1e4).toBeCloseTo(5.5015643181, 6)
    expect(fit.sum).toBeCloseTo(0.12455138894, 9)
    const variance = fit.sum / (x.length - 2)
    expect(Math.sqrt(variance * (fit.unitCovariance?.[0][0] ?? 0))).toBeCloseTo(2.7070075241, 4)
    expect(Math.sqrt(variance * (fit.unitCovariance?.[1][1] ?? 0)) * 1e6).toBeCloseTo(7.2668688436, 4)
  })

  // H. Rosenbrock, Computer Journal 3, 175 (1960): the minimum is 0 at (1, 1).
  it('walks the bent valley of Rosenbrock', () => {
    const fit = leastSquares(([a, b]) => [10 * (b - a * a), 1 - a], [-1.2, 1], { steps: [1, 1] })
    expect(fit.parameters[0]).toBeCloseTo(1, 8)
    expect(fit.parameters[1]).toBeCloseTo(1, 8)
  })

  it('gives no covariance where the residuals leave a parameter free', () => {
    const fit = leastSquares(([a, b]) => [a + b - 1, 2 * a + 2 * b - 2], [0, 0], { steps: [1, 1] })
    expect(fit.sum).toBeCloseTo(0, 10)
    expect(fit.unitCovariance).toBeNull()
  })

  it('keeps away from where the residuals are not numbers', () => {
    const fit = leastSquares(([a]) => [Math.log(a) - 1], [0.01], { steps: [1] })
    expect(fit.parameters[0]).toBeCloseTo(Math.E, 8)
  })
})

describe('symmetric equations', () => {
  it('are solved, and refused when singular', () => {
    const matrix = [
      [4, 2],
      [2, 3],
    ]
    expect(solveSymmetric(matrix, [8, 7])?.map((value) => Math.round(value * 1e12) / 1e12)).toEqual([1.25, 1.5])
    expect(invertSymmetric(matrix)?.[0][0]).toBeCloseTo(3 / 8, 12)
    expect(
      solveSymmetric(
        [
          [1, 1],
          [1, 1],
        ],
        [1, 1],
      ),
    ).toBeNull()
    expect(invertSymmetric([[0]])).toBeNull()
  })
})
