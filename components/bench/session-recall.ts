/** What comes into a sitting from outside it: earlier visits, other tabs, and what the server says of an earlier answer. */
import type { Answer, BenchSession, Draft, Look } from './bench-session'
import { firstView } from './first-view'

/** Grades of an earlier visit that are still on their way: the server does not count them yet. */
export function foundWaiting(session: BenchSession, candidateIds: readonly number[], firsts: number): BenchSession {
  const upcoming = session.upcoming.filter(({ id }) => !candidateIds.includes(id))
  const { given, left } = session.counts
  const counts = { given: given + firsts, left: Math.max(upcoming.length, left - firsts) }
  const changed = session.lookingBack === null && upcoming[0]?.id !== session.upcoming[0]?.id
  return { ...session, upcoming, counts, ...(changed ? firstView(upcoming[0]) : {}) }
}

/** Another tab of this person has graded: its candidates leave this one, and what it corrected is corrected here. */
export function givenElsewhere(
  session: BenchSession,
  grades: readonly { candidateId: number; answer: Answer; first: boolean }[],
): BenchSession {
  const answers = new Map(grades.map(({ candidateId, answer }) => [candidateId, answer]))
  const firsts = grades.filter(({ first }) => first).length
  const given = session.given.map((look) => {
    const answer = answers.get(look.candidate.id)
    return answer ? { ...look, answer } : look
  })
  return foundWaiting({ ...session, given }, [...answers.keys()], firsts)
}

/**
 * The looks of this sitting from before a reload come before those since, and so does what was written and not sent. What is
 * on the bench again, because the server has no grade of it, is not looked back at.
 */
export function recalled(session: BenchSession, looks: readonly Look[], drafts: Record<number, Draft>): BenchSession {
  const here = new Set([...session.given, ...session.upcoming.map((candidate) => ({ candidate }))].map(idOf))
  // What came back turned is not looked back at after a reload: the first grade would be told beside it.
  const earlier = looks.filter((look) => !here.has(idOf(look)) && !look.candidate.turned)
  return {
    ...session,
    given: [...earlier, ...session.given],
    lookingBack: session.lookingBack === null ? null : session.lookingBack + earlier.length,
    drafts: { ...drafts, ...session.drafts },
  }
}

const idOf = ({ candidate }: Pick<Look, 'candidate'>) => candidate.id

/** What stands at the server is another answer than this browser remembers. */
export function corrected(session: BenchSession, candidateId: number, answer: Answer): BenchSession {
  const given = session.given.map((look) => (look.candidate.id === candidateId ? { ...look, answer } : look))
  return { ...session, given }
}
