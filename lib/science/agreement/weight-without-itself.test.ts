import { expect, it } from 'vitest'
import { LENS, NOT_A_LENS } from '@/lib/science/agreement/lens-model'
import { weightWithoutItself } from '@/lib/science/agreement/weight-without-itself'

it('is that of the pseudo-counts where a grader has graded nothing else', () => {
  // A: 4 of 10 lenses and 0.5 of 10 others; N: 1 of 10 and 6 of 10.
  expect(weightWithoutItself([1, 0, 0, 0, 0, 0, 0, 0], { grader: 0, grade: 0, truth: LENS })).toBeCloseTo(
    Math.log(8),
    12,
  )
  const second = [9, 9, 9, 9, 9, 9, 9, 9, 0, 0, 0, 0, 0, 0, 0, 1]
  expect(weightWithoutItself(second, { grader: 1, grade: 3, truth: NOT_A_LENS })).toBeCloseTo(Math.log(1 / 6), 12)
})

it('takes the grade out of the class that it was of and leaves the other as it is', () => {
  // By hand: B to a lens, of 5 B among 20 lenses and 2 among 30 others: (5 + 3 - 1) / (20 + 10 - 1) over (2 + 1) / (30 + 10).
  const counts = [10, 5, 3, 2, 1, 2, 7, 20]
  expect(weightWithoutItself(counts, { grader: 0, grade: 1, truth: LENS })).toBeCloseTo(Math.log(7 / 29 / (3 / 40)), 12)
})
