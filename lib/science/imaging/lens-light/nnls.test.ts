import { describe, expect, it } from 'vitest'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { nonNegativeLeastSquares, solveSymmetric } from './nnls'

function normalEquations(columns: number[][], right: number[]) {
  const size = columns.length
  const dot = (a: number[], b: number[]) => a.reduce((sum, value, i) => sum + value * b[i], 0)
  const gram = Float64Array.from({ length: size * size }, (_, k) =>
    dot(columns[Math.floor(k / size)], columns[k % size]),
  )
  return { gram, moment: Float64Array.from(columns, (column) => dot(column, right)) }
}

describe('least squares without negative coefficients', () => {
  // By hand: alone, (1, 3, 5) gains 64 / 35 = 1.83 and (2, 4, 6) gains 100 / 56 = 1.79; together one would be negative.
  it('leaves a column out that would come out negative', () => {
    const columns = [
      [1, 3, 5],
      [2, 4, 6],
    ]
    const { gram, moment } = normalEquations(columns, [1, -1, 2])
    const x = nonNegativeLeastSquares(gram, moment)
    expect(x[0]).toBeCloseTo(8 / 35, 12)
    expect(x[1]).toBe(0)
  })

  it('finds coefficients that are positive exactly, and 0 where nothing is gained', () => {
    const columns = [
      [1, 0, 0, 1],
      [0, 1, 0, 1],
      [0, 0, 1, 1],
    ]
    const right = [2, 0, 3, 5]
    const { gram, moment } = normalEquations(columns, right)
    const x = nonNegativeLeastSquares(gram, moment)
    expect(x[0]).toBeCloseTo(2, 10)
    expect(x[1]).toBeCloseTo(0, 10)
    expect(x[2]).toBeCloseTo(3, 10)
    expect(nonNegativeLeastSquares(gram, new Float64Array(3))).toEqual(new Float64Array(3))
  })

  // Karush-Kuhn-Tucker: x >= 0, gradient A^T (b - A x) <= 0, and 0 wherever x > 0 (Lawson & Hanson, theorem 23.4).
  it('meets the conditions of an optimum on random problems', () => {
    const random = new SeededRandom(9)
    for (let trial = 0; trial < 50; trial++) {
      const columns = Array.from({ length: 6 }, () => Array.from({ length: 9 }, () => random.normal() + 0.5))
      const { gram, moment } = normalEquations(
        columns,
        Array.from({ length: 9 }, () => random.normal()),
      )
      const x = nonNegativeLeastSquares(gram, moment)
      x.forEach((value, i) => {
        const gradient = moment[i] - x.reduce((sum, other, j) => sum + gram[i * 6 + j] * other, 0)
        expect(value).toBeGreaterThanOrEqual(0)
        expect(gradient).toBeLessThan(1e-8)
        if (value > 0) expect(Math.abs(gradient)).toBeLessThan(1e-8)
      })
    }
  })
})

describe('a symmetric system', () => {
  it('is solved when positive definite and refused when not', () => {
    const solution = solveSymmetric(Float64Array.from([4, 2, 2, 3]), Float64Array.from([8, 7]))
    expect(solution?.[0]).toBeCloseTo(1.25, 12)
    expect(solution?.[1]).toBeCloseTo(1.5, 12)
    expect(solveSymmetric(Float64Array.from([1, 2, 2, 1]), Float64Array.from([1, 1]))).toBeNull()
  })
})
