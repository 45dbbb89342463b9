/** What the bench says to the server. Every other file of the bench works without a network. */
import type { GradeLetter } from '@/db/schema/grading'
import type { OwnAnswer } from '@/lib/work/grading/own-answer'
import type { RecordedGrade } from '@/lib/work/grading/record-grade'
import type { PERSON_HEADER } from '@/lib/work/people/person-header'
import type { LentQueue } from '@/lib/work/queue/lend-next'
import type { Answer } from './bench-session'

export interface GradeBody {
  id: string
  grade: GradeLetter
  tags: string[]
  remark: string | null
  view: string | null
  seconds: number
  reason: string | null
  /** The answer to a look that was asked for by name: the id of the ask. */
  asked?: number
  /** The answer to a candidate that came back, with the turn that it was shown in. */
  turned?: number
  /** Version of the recipe of the pictures that were judged. */
  recipe?: number | null
}

export type SendOutcome =
  /**
   * `replaced`: the server had another grade of this person there, which this one corrected. `late`: the candidate had all its looks,
   * so it counts nowhere. `called`: the candidate's name, where the person may know it now.
   */
  | { outcome: 'saved'; replaced?: boolean; late?: boolean; called?: string }
  /** The server said no to this grade for what it is: asking again will not help. */
  | { outcome: 'refused'; sentence: string }
  /**
   * To be tried again; the sentence says why it has not worked, and signing in may mend it. `answered`: the server is there and works,
   * so what is behind it in line may fare better.
   */
  | { outcome: 'trouble'; sentence: string; signIn?: true; answered?: true }

/** Whose bench this is: the server takes nothing of it for anybody else who has signed in beside it. */
export interface BenchOwner {
  slug: string
  personId: number
}

/** Typed by the server's constant, so that the two cannot differ. */
const HEADER: typeof PERSON_HEADER = 'ringside-person'

const whose = ({ personId }: BenchOwner) => ({ [HEADER]: String(personId) })

/** Longer than any answer takes, on a slow network too. */
const ANSWER_MS = 30_000

const SOMETHING_ELSE = 'Something else than Ringside answers under its address, perhaps the sign-in page of a network.'

const root = (slug: string) => `/api/campaigns/${encodeURIComponent(slug)}`

async function problemOf(response: Response): Promise<{ type: unknown; sentence: string }> {
  const body = (await response.json().catch(() => null)) as { type?: unknown; detail?: unknown } | null
  const sentence = typeof body?.detail === 'string' ? body.detail : `The server answered ${response.status}.`
  return { type: body?.type, sentence }
}

/** A candidate that is gone answers as a campaign does that one may no longer see: whether the campaign is still there tells. */
async function isMember(owner: BenchOwner): Promise<boolean> {
  const response = await fetch(`${root(owner.slug)}/waiting`, { cache: 'no-store', headers: whose(owner) }).catch(
    () => null,
  )
  return response?.ok ?? false
}

/** About this grade and nothing else, and so for good. All other refusals may end: a right is given back, a proxy mended. */
const isFinal = (status: number, type: string) =>
  status === 422 || (status === 409 && type !== 'urn:ringside:problem:not-imaged')

export async function sendGrade(owner: BenchOwner, candidateId: number, body: GradeBody): Promise<SendOutcome> {
  let response: Response
  try {
    response = await fetch(`${root(owner.slug)}/candidates/${candidateId}/grade`, {
      method: 'PUT',
      headers: { 'content-type': 'application/json', ...whose(owner) },
      // After hours without a network a candidate may have all its looks: then the grade is kept beside them.
      body: JSON.stringify({ ...body, late: true }),
      // Finishes even when the page is closed meanwhile.
      keepalive: true,
      // A connection that says nothing must not hold up the tabs that wait for their turn.
      signal: AbortSignal.timeout(ANSWER_MS),
    })
  } catch {
    return { outcome: 'trouble', sentence: 'The server cannot be reached.' }
  }
  if (response.ok) {
    const answer = (await response.json().catch(() => null)) as Partial<RecordedGrade> | null
    // The sign-in page of a hotel's network answers 200 as well.
    if (typeof answer?.grade?.id !== 'string') return { outcome: 'trouble', sentence: SOMETHING_ELSE }
    const { replaced, late, called } = answer
    return { outcome: 'saved', replaced: typeof replaced === 'string', late: late === true, called }
  }
  if (response.status === 401) {
    return {
      outcome: 'trouble',
      sentence: 'You are signed out. What waits is kept and goes once you are signed in again.',
      signIn: true,
    }
  }
  if (response.status >= 500 || response.status === 429 || response.status === 408) {
    return { outcome: 'trouble', sentence: 'The server has trouble just now.' }
  }
  const { type, sentence } = await problemOf(response)
  if (type === 'urn:ringside:problem:other-person') {
    return {
      outcome: 'trouble',
      sentence:
        'Somebody else has signed in in this browser. Your grades are kept here and go only once you are signed in again as yourself, in another tab.',
    }
  }
  if (typeof type !== 'string' || !type.startsWith('urn:ringside:')) {
    return { outcome: 'trouble', sentence: SOMETHING_ELSE }
  }
  if (isFinal(response.status, type) || (response.status === 404 && (await isMember(owner)))) {
    return { outcome: 'refused', sentence }
  }
  return { outcome: 'trouble', sentence, answered: true }
}

/** @throws Error when nothing usable comes back. */
export async function askQueue(owner: BenchOwner, count: number): Promise<LentQueue> {
  const response = await fetch(`${root(owner.slug)}/queue?count=${count}`, { cache: 'no-store', headers: whose(owner) })
  if (!response.ok) throw new Error((await problemOf(response)).sentence)
  return (await response.json()) as LentQueue
}

/**
 * What stands of the person's own at the server, and whether it may still be corrected.
 * @throws Error when nothing usable comes back.
 */
export async function askOwnAnswer(
  owner: BenchOwner,
  candidateId: number,
): Promise<{ answer: Answer | null; open: boolean }> {
  const response = await fetch(`${root(owner.slug)}/candidates/${candidateId}/grade`, {
    cache: 'no-store',
    headers: whose(owner),
  })
  if (!response.ok) throw new Error((await problemOf(response)).sentence)
  const { answer, open } = (await response.json()) as OwnAnswer
  if (!answer) return { answer, open }
  const { grade, tags, reason, remark } = answer
  return { answer: { grade, tags, reason, remark: remark ?? '' } as Answer, open }
}

/** Best effort: a lease that is not given back runs out by itself. */
export function giveBackQueue(owner: BenchOwner, candidateIds: number[]): void {
  if (candidateIds.length === 0) return
  const url = `${root(owner.slug)}/queue?candidates=${candidateIds.join(',')}`
  void fetch(url, { method: 'DELETE', keepalive: true, headers: whose(owner) }).catch(() => {})
}
