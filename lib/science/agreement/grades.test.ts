import { describe, expect, it } from 'vitest'
import { readFixture } from '@/lib/science/agreement/_fixtures'
import { GRADE_POINTS, gradesAmong, meanAndSpread } from '@/lib/science/agreement/grades'

const reference = readFixture('vote-vectors.json')

describe('grade points', () => {
  it('give a sure lens three points and not a lens none, and cannot judge no number at all', () => {
    expect(GRADE_POINTS).toEqual({ A: 3, B: 2, C: 1, N: 0 })
    expect('U' in GRADE_POINTS).toBe(false)
  })

  it('are never given for cannot judge: only grades remain, surest first', () => {
    expect(gradesAmong(['N', 'U', 'A', 'C', 'U', 'B', 'A'])).toEqual(['A', 'A', 'B', 'C', 'N'])
  })
})

describe('meanAndSpread', () => {
  // Exact fractions of the count vectors in fixtures/agreement/vote-vectors.json, printed to 12 digits.
  it.each(reference.vectors)('equals the exact fractions for the votes "$name"', ({ counts, mean, population_sd }) => {
    const result = meanAndSpread(counts.flatMap((count, points) => new Array<number>(count).fill(points)))
    expect(result.n).toBe(counts.reduce((sum, count) => sum + count, 0))
    expect(result.mean).toBeCloseTo(mean, 9)
    expect(result.spread).toBeCloseTo(population_sd, 9)
  })

  it('has no mean for no points and no spread in a single one', () => {
    expect(meanAndSpread([])).toEqual({ n: 0, mean: null, spread: null })
    expect(meanAndSpread([2])).toEqual({ n: 1, mean: 2, spread: 0 })
  })

  it('meets a threshold exactly where arithmetic on paper does', () => {
    // {3, 1} and {2, 2, 2, 2, 2, 2, 2, 0, 0, 0, 0, 0, 0, 0} have variance 1.
    expect(meanAndSpread([3, 1]).spread).toBe(1)
    expect(meanAndSpread([2, 2, 2, 2, 2, 2, 2, 0, 0, 0, 0, 0, 0, 0]).spread).toBe(1)
  })

  it('passes NaN on rather than hide it', () => {
    expect(meanAndSpread([1, NaN]).mean).toBeNaN()
    expect(meanAndSpread([1, NaN]).spread).toBeNaN()
  })
})
