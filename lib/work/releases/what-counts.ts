import type { ReleasedGrade } from '@/db/queries/release-making'

export interface ReleasedAnswer extends ReleasedGrade {
  /** Why it does not count; null where it does. */
  notCounted: 'corrected' | 'answered again when asked' | 'repeat look' | 'came late' | 'grader left out' | null
}

/**
 * Which of a candidate's grades count for its verdict: of each person the newest one, first look or asked for, unless the person is
 * left out of the consensus. The same as `countedAnswers` of db/queries/consensus.ts, with the reason for those that do not.
 * @param grades of one or more candidates, all of each.
 */
export function whatCounts(grades: readonly ReleasedGrade[], leftOut: ReadonlySet<number>): ReleasedAnswer[] {
  const standing = new Map<string, number>()
  const corrected = new Set<number>()
  for (const { id, candidateId, personId, occasion, replaces } of grades) {
    if (replaces !== null) corrected.add(replaces)
    if (occasion === 'repeat' || occasion === 'late') continue
    const key = `${candidateId} ${personId}`
    standing.set(key, Math.max(id, standing.get(key) ?? 0))
  }
  const reasonOf = ({ id, candidateId, personId, occasion }: ReleasedGrade): ReleasedAnswer['notCounted'] => {
    if (corrected.has(id)) return 'corrected'
    if (occasion === 'repeat') return 'repeat look'
    if (occasion === 'late') return 'came late'
    if (standing.get(`${candidateId} ${personId}`) !== id) return 'answered again when asked'
    return leftOut.has(personId) ? 'grader left out' : null
  }
  return grades.map((grade) => ({ ...grade, notCounted: reasonOf(grade) }))
}
