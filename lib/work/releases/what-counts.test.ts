import { expect, it } from 'vitest'
import type { ReleasedGrade } from '@/db/queries/release-making'
import { whatCounts } from './what-counts'

const given = (id: number, personId: number, occasion: ReleasedGrade['occasion'], replaces: number | null = null) => ({
  id,
  candidateId: 1,
  personId,
  by: `G0${personId}`,
  occasion,
  grade: 'A' as const,
  tags: '[]' as ReleasedGrade['tags'],
  reason: null,
  remark: null,
  replaces,
  givenAt: '2026-12-01T10:00:00.000Z' as ReleasedGrade['givenAt'],
})

it('says of each answer whether the verdict rests on it, and why not: a late one never counts nor stands before another', () => {
  const grades = [
    given(1, 1, 'first'),
    given(2, 1, 'first', 1),
    given(3, 1, 'repeat'),
    given(4, 2, 'first'),
    given(5, 2, 'asked'),
    given(6, 3, 'first'),
    given(7, 4, 'late'),
    given(8, 5, 'first'),
    given(9, 5, 'late'),
  ]
  expect(whatCounts(grades, new Set([3])).map(({ notCounted }) => notCounted)).toEqual([
    'corrected',
    null,
    'repeat look',
    'answered again when asked',
    null,
    'grader left out',
    'came late',
    null,
    'came late',
  ])
})
