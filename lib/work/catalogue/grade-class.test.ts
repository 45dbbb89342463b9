import { expect, it } from 'vitest'
import { gradeClass } from './grade-class'

// Expected letters: the halves between the points A 3, B 2, C 1; common practice, no source.
it.each([
  [3, 'A'],
  [2.5, 'A'],
  [2.4999, 'B'],
  [1.5, 'B'],
  [1.4999, 'C'],
  [0, 'C'],
] as const)('puts a mean of %d points into class %s', (mean, letter) => {
  expect(gradeClass(null, mean)).toBe(letter)
})

it('lets the grade of a ruling stand over the mean', () => {
  expect(gradeClass('C', 3)).toBe('C')
  expect(gradeClass('A', null)).toBe('A')
})

it('gives no class where there is neither a ruled grade nor a mean', () => {
  expect(gradeClass(null, null)).toBeNull()
})
