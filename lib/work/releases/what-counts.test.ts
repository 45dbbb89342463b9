import { expect, it } from 'vitest'
import type { ReleasedGrade } from '@/db/queries/release-making'
import { whatCounts } from './what-counts'

const grade = (id: number, more: Partial<ReleasedGrade> = {}): ReleasedGrade => ({
  id,
  candidateId: 1,
  by: 'G02',
  personId: 2,
  occasion: 'first',
  grade: 'A',
  tags: '[]',
  reason: null,
  remark: null,
  replaces: null,
  givenAt: '2026-01-01T00:00:00.000Z',
  ...more,
})
const reasons = (grades: ReleasedGrade[], leftOut: number[] = []) =>
  whatCounts(grades, new Set(leftOut)).map(({ notCounted }) => notCounted)

it('counts of each person the newest answer, and says of the others why they do not count', () => {
  expect(reasons([grade(1), grade(2, { replaces: 1 }), grade(3, { personId: 3 })])).toEqual(['corrected', null, null])
  expect(reasons([grade(1), grade(2, { occasion: 'asked' })])).toEqual(['answered again when asked', null])
  expect(reasons([grade(1), grade(2, { occasion: 'repeat' })])).toEqual([null, 'repeat look'])
  expect(reasons([grade(1), grade(2, { personId: 3, occasion: 'late' })])).toEqual([null, 'came late'])
})

it('keeps candidates apart, and counts nobody who is left out', () => {
  expect(reasons([grade(1), grade(2, { candidateId: 2 })])).toEqual([null, null])
  expect(reasons([grade(1), grade(2, { personId: 3 })], [2])).toEqual(['grader left out', null])
})
