import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { finiteValues, selectMedian, selectQuantile, selectRank } from './selection'

const numbers = fc.array(fc.double({ noNaN: true, noDefaultInfinity: true, min: -1e6, max: 1e6 }), { minLength: 1 })

describe('selection', () => {
  it('finds the element that sorting would put at a rank, and splits the rest about it', () => {
    fc.assert(
      fc.property(numbers, fc.nat(), (list, n) => {
        const rank = n % list.length
        const work = Float64Array.from(list)
        const found = selectRank(work, rank)
        expect(found).toBe(Float64Array.from(list).sort()[rank])
        expect(work.subarray(0, rank).every((value) => value <= found)).toBe(true)
        expect(work.subarray(rank + 1).every((value) => value >= found)).toBe(true)
      }),
    )
  })

  it('takes the mean of the two middle values as the median of an even number', () => {
    expect(selectMedian(Float64Array.of(4, 1, 3, 2))).toBe(2.5)
    expect(selectMedian(Float64Array.of(9, 1, 3))).toBe(3)
    expect(selectMedian(new Float64Array(0))).toBeNaN()
  })

  // numpy.quantile([1, 2, 4, 8], 0.4) = 2.4 by the definition h = (n - 1) q.
  it('interpolates quantiles linearly between ranks', () => {
    expect(selectQuantile(Float64Array.of(8, 1, 4, 2), 0.4)).toBeCloseTo(2.4, 12)
    expect(selectQuantile(Float64Array.of(8, 1, 4, 2), 1)).toBe(8)
    expect(selectQuantile(Float64Array.of(8, 1, 4, 2), 0)).toBe(1)
  })

  it('leaves out what is not finite', () => {
    expect([...finiteValues([1, Number.NaN, Number.NEGATIVE_INFINITY, 2])]).toEqual([1, 2])
  })
})
