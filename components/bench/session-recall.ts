/** What comes into a sitting from outside it: earlier visits, other tabs, and what the server says of an earlier answer. */
import type { Answer, BenchSession, Draft, Look } from './bench-session'
import { firstView } from './first-view'
import { isLook, lookIdOf, type LookId } from './look-id'

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
  grades: readonly (LookId & { answer: Answer; first: boolean })[],
): BenchSession {
  const firsts = grades.filter(({ first }) => first).length
  const given = session.given.map((look) => {
    const answer = grades.findLast((grade) => isLook(look, grade))?.answer
    return answer ? { ...look, answer } : look
  })
  const candidateIds = [...new Set(grades.map(({ candidateId }) => candidateId))]
  return foundWaiting({ ...session, given }, candidateIds, firsts)
}

/**
 * The looks of this sitting from before a reload come before those since, and so does what was written and not sent. What is
 * on the bench again, because the server has no grade of it, is not looked back at.
 */
export function recalled(session: BenchSession, looks: readonly Look[], drafts: Record<number, Draft>): BenchSession {
  const here = [...session.given, ...session.upcoming.map((candidate) => ({ candidate }))]
  const earlier = looks.filter((look) => !here.some((one) => isLook(one, lookIdOf(look.candidate))))
  return {
    ...session,
    given: [...earlier, ...session.given],
    lookingBack: session.lookingBack === null ? null : session.lookingBack + earlier.length,
    drafts: { ...drafts, ...session.drafts },
  }
}

/** What a candidate that was given a grade is called. */
export function called(
  session: BenchSession,
  { candidateId, called: name }: { candidateId: number; called: string },
): BenchSession {
  const isNew = (look: Look) => look.candidate.id === candidateId && (look.called ?? look.candidate.name) !== name
  if (!session.given.some(isNew)) return session
  return { ...session, given: session.given.map((look) => (isNew(look) ? { ...look, called: name } : look)) }
}

/** What stands at the server is another answer than this browser remembers. */
export function corrected(session: BenchSession, id: LookId, answer: Answer): BenchSession {
  const given = session.given.map((look) => (isLook(look, id) ? { ...look, answer } : look))
  return { ...session, given }
}
