/**
 * One sitting at the bench, as plain state: what comes, what was given, where the person looks. Pure, so that undo, correction
 * and refill can be tested without a browser; sending and asking happen around it.
 */
import type { GradeLetter } from '@/db/schema/grading'
import type { CannotJudgeReason, Tag } from '@/lib/work/grading/tags'
import type { BenchCandidate } from '@/lib/work/queue/lend-next'
import { firstView } from './first-view'
import { isLook, lookIdOf, type LookId } from './look-id'
import { called, corrected, foundWaiting, givenElsewhere, recalled } from './session-recall'

export interface Draft {
  tags: Tag[]
  remark: string
}

export interface Answer extends Draft {
  grade: GradeLetter
  reason: CannotJudgeReason | null
}

export interface Look {
  candidate: BenchCandidate
  /** Its name, told once it is judged: before, a grader has its number alone. */
  called?: string
  answer: Answer
  /** The view in sight when it was given, and the seconds taken. */
  view: string | null
  seconds: number
  /** When it was first given, milliseconds since 1970: the order of undo. */
  at: number
}

/** 'dry': the server had fewer than asked for, although more is left: it lies on other people's benches. */
export type Supply = 'ready' | 'asking' | 'dry' | 'failed'

export interface BenchSession {
  /** In the order in which they were first given. */
  given: Look[]
  /** The first is on the bench, unless the person looks back. */
  upcoming: BenchCandidate[]
  /** Index into `given`, or null for the present. */
  lookingBack: number | null
  /** What was tagged and written but not yet given, by candidate. */
  drafts: Record<number, Draft>
  view: string | null
  previousView: string | null
  counts: { given: number; left: number }
  supply: Supply
  imaged: boolean
  /** What the person did last, for the line that confirms it. */
  last: ({ what: 'given' | 'corrected' | 'kept' } & LookId) | null
}

export interface Supplied {
  candidates: BenchCandidate[]
  given: number
  left: number
  imaged: boolean
}

export type BenchAction =
  | { type: 'graded'; answer: Answer; view: string | null; seconds: number; at: number }
  | { type: 'went back' }
  | { type: 'kept' }
  | { type: 'explained'; reason: CannotJudgeReason }
  | { type: 'tag toggled'; tag: Tag }
  | { type: 'remark written'; remark: string }
  | { type: 'view chosen'; key: string }
  | { type: 'asked' }
  | { type: 'ask failed' }
  | {
      type: 'supplied'
      supplied: Supplied
      /** How many were asked for, those held already included. */
      asked: number
      /** Candidates whose grades are on their way, and how many of those are first grades: the server does not count them yet. */
      waiting: { candidateIds: number[]; firsts: number }
      /** After an absence what was on the bench may have gone to others; else it stays under the person's eyes. */
      resumed: boolean
    }
  | ({ type: 'refused' } & LookId)
  /** The server keeps the answer that it had. */
  | ({ type: 'correction refused'; before: Answer } & LookId)
  /** Grades of an earlier visit that are still on their way, found when the page opened. */
  | { type: 'found waiting'; candidateIds: number[]; firsts: number }
  | { type: 'given elsewhere'; grades: (LookId & { answer: Answer; first: boolean })[] }
  /** From before a reload. */
  | { type: 'recalled'; looks: Look[]; drafts: Record<number, Draft> }
  | { type: 'called'; candidateId: number; called: string }
  /** The server has another answer than was remembered, or none. */
  | { type: 'stands'; candidateId: number; answer: Answer | null }

export const EMPTY_DRAFT: Draft = { tags: [], remark: '' }

export function openSession(supplied: Supplied): BenchSession {
  return {
    given: [],
    upcoming: supplied.candidates,
    lookingBack: null,
    drafts: {},
    counts: { given: supplied.given, left: supplied.left },
    supply: 'ready',
    imaged: supplied.imaged,
    last: null,
    ...firstView(supplied.candidates[0]),
  }
}

export function currentLook(
  session: BenchSession,
): { candidate: BenchCandidate; answer: Answer | null; called?: string } | null {
  if (session.lookingBack !== null) return session.given[session.lookingBack] ?? null
  const candidate = session.upcoming[0]
  return candidate ? { candidate, answer: null } : null
}

export function currentDraft(session: BenchSession): Draft {
  const look = currentLook(session)
  return look ? (session.drafts[look.candidate.id] ?? look.answer ?? EMPTY_DRAFT) : EMPTY_DRAFT
}

export function sameAnswer(a: Answer, b: Answer): boolean {
  const tags = (answer: Answer) => [...answer.tags].sort().join()
  return a.grade === b.grade && a.reason === b.reason && a.remark.trim() === b.remark.trim() && tags(a) === tags(b)
}

/** The last look, when it was 'cannot judge' and may be explained. */
export function explainable(session: BenchSession): Look | null {
  if (session.lookingBack !== null || session.last === null) return null
  const { last } = session
  const look = session.given.find((one) => isLook(one, last))
  return look?.answer.grade === 'U' ? look : null
}

export function reduceSession(session: BenchSession, action: BenchAction): BenchSession {
  switch (action.type) {
    case 'graded':
      return graded(session, action)
    case 'went back':
      return wentBack(session)
    case 'kept':
      return kept(session)
    case 'explained':
      return explained(session, action.reason)
    case 'tag toggled':
      return drafted(session, (draft) => ({
        ...draft,
        tags: draft.tags.includes(action.tag)
          ? draft.tags.filter((tag) => tag !== action.tag)
          : [...draft.tags, action.tag],
      }))
    case 'remark written':
      return drafted(session, (draft) => ({ ...draft, remark: action.remark }))
    case 'view chosen':
      return action.key === session.view
        ? session
        : { ...session, view: action.key, previousView: session.view ?? session.previousView }
    case 'asked':
      return { ...session, supply: 'asking' }
    case 'ask failed':
      return { ...session, supply: 'failed' }
    case 'supplied':
      return refilled(session, action)
    case 'refused':
      return refused(session, action)
    case 'correction refused':
      return {
        ...corrected(session, action, action.before),
        last: isLast(session, action) ? null : session.last,
      }
    case 'found waiting':
      return foundWaiting(session, action.candidateIds, action.firsts)
    case 'given elsewhere':
      return givenElsewhere(session, action.grades)
    case 'recalled':
      return recalled(session, action.looks, action.drafts)
    case 'called':
      return called(session, action)
    case 'stands':
      return action.answer ? corrected(session, action, action.answer) : refused(session, action)
  }
}

const isLast = ({ last }: BenchSession, { candidateId, turned }: LookId): boolean =>
  last?.candidateId === candidateId && (last.turned ?? 0) === (turned ?? 0)

function without(drafts: Record<number, Draft>, id: number): Record<number, Draft> {
  return Object.fromEntries(Object.entries(drafts).filter(([key]) => Number(key) !== id))
}

function graded(session: BenchSession, { answer, view, seconds, at }: BenchAction & { type: 'graded' }): BenchSession {
  const look = currentLook(session)
  if (!look) return session
  const id = lookIdOf(look.candidate)
  const drafts = without(session.drafts, id.candidateId)
  if (look.answer) {
    const same = sameAnswer(look.answer, answer)
    const given = session.given.map((old) => (isLook(old, id) ? { ...old, answer, view, seconds } : old))
    const last = { what: same ? ('kept' as const) : ('corrected' as const), ...id }
    return { ...session, given, drafts, lookingBack: null, last, ...firstView(session.upcoming[0]) }
  }
  const upcoming = session.upcoming.slice(1)
  return {
    ...session,
    given: [
      ...session.given.filter((old) => !isLook(old, id)),
      { candidate: look.candidate, answer, view, seconds, at },
    ],
    upcoming,
    drafts,
    counts: { given: session.counts.given + 1, left: Math.max(0, session.counts.left - 1) },
    last: { what: 'given', ...id },
    ...firstView(upcoming[0]),
  }
}

function wentBack(session: BenchSession): BenchSession {
  const target = session.lookingBack === null ? session.given.length - 1 : session.lookingBack - 1
  if (target < 0) return session
  return { ...session, lookingBack: target, ...firstView(session.given[target].candidate) }
}

function kept(session: BenchSession): BenchSession {
  if (session.lookingBack === null) return session
  const id = lookIdOf(session.given[session.lookingBack].candidate)
  return {
    ...session,
    lookingBack: null,
    drafts: without(session.drafts, id.candidateId),
    last: { what: 'kept', ...id },
    ...firstView(session.upcoming[0]),
  }
}

function explained(session: BenchSession, reason: CannotJudgeReason): BenchSession {
  const look = explainable(session)
  if (!look) return session
  const answer = { ...look.answer, reason }
  return { ...session, given: session.given.map((old) => (old === look ? { ...old, answer } : old)) }
}

function drafted(session: BenchSession, change: (draft: Draft) => Draft): BenchSession {
  const look = currentLook(session)
  if (!look) return session
  const { tags, remark } = change(currentDraft(session))
  return { ...session, drafts: { ...session.drafts, [look.candidate.id]: { tags, remark } } }
}

function refilled(session: BenchSession, action: BenchAction & { type: 'supplied' }): BenchSession {
  const { supplied, waiting, resumed } = action
  const onTheirWay = new Set(waiting.candidateIds)
  // A look that is asked for anew comes again, and a candidate that comes back turned, although graded in this sitting.
  const offered = supplied.candidates.filter(({ id, asked, turned }) => {
    if (onTheirWay.has(id)) return false
    const before = session.given.filter(({ candidate }) => candidate.id === id)
    if (before.length === 0) return true
    if (asked && before.every(({ candidate }) => candidate.asked?.id !== asked.id)) return true
    return turned !== undefined && before.every(({ candidate }) => candidate.turned !== turned)
  })
  const stillOffered = new Set(offered.map(({ id }) => id))
  const kept = session.upcoming.filter(({ id }, index) => stillOffered.has(id) || (index === 0 && !resumed))
  const known = new Set(kept.map(({ id }) => id))
  const fresh = offered.filter(({ id }) => !known.has(id))
  const [asked, others] = [fresh.filter((one) => one.asked), fresh.filter((one) => !one.asked)]
  // What is under the person's eyes stays there; asked looks come next.
  const upcoming = [...kept.slice(0, 1), ...asked, ...kept.slice(1), ...others]
  const left = Math.max(upcoming.length, supplied.left - waiting.firsts)
  const changed = session.lookingBack === null && upcoming[0]?.id !== session.upcoming[0]?.id
  return {
    ...session,
    upcoming,
    counts: { given: supplied.given + waiting.firsts, left },
    imaged: supplied.imaged,
    supply: supplied.candidates.length < action.asked && left > upcoming.length ? 'dry' : 'ready',
    ...(changed ? firstView(upcoming[0]) : {}),
  }
}

/** The server did not take the grade, so it does not count as given. */
function refused(session: BenchSession, id: LookId): BenchSession {
  const index = session.given.findIndex((look) => isLook(look, id))
  if (index < 0) return session
  const given = session.given.filter((_, position) => position !== index)
  const { lookingBack } = session
  const moved =
    lookingBack === null || lookingBack < index ? lookingBack : lookingBack === index ? null : lookingBack - 1
  return {
    ...session,
    given,
    lookingBack: moved,
    counts: { ...session.counts, given: Math.max(0, session.counts.given - 1) },
    last: isLast(session, id) ? null : session.last,
    ...(lookingBack === index ? firstView(session.upcoming[0]) : {}),
  }
}
