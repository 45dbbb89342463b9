/** What the bench says to the server. Every other file of the bench works without a network. */
import type { GradeLetter } from '@/db/schema/grading'
import type { LentQueue } from '@/lib/work/queue/lend-next'

export interface GradeBody {
  id: string
  grade: GradeLetter
  tags: string[]
  remark: string | null
  view: string | null
  seconds: number
  reason: string | null
  /** Version of the recipe of the pictures that were judged. */
  recipe?: number | null
}

export type SendOutcome =
  | { outcome: 'saved' }
  /** The server understood and said no: asking again will not help. */
  | { outcome: 'refused'; sentence: string }
  /** To be tried again; the sentence says why it has not worked. */
  | { outcome: 'trouble'; sentence: string }

const root = (slug: string) => `/api/campaigns/${encodeURIComponent(slug)}`

async function problemSentence(response: Response): Promise<string> {
  const body = (await response.json().catch(() => null)) as { detail?: unknown } | null
  return typeof body?.detail === 'string' ? body.detail : `The server answered ${response.status}.`
}

export async function sendGrade(slug: string, candidateId: number, body: GradeBody): Promise<SendOutcome> {
  let response: Response
  try {
    response = await fetch(`${root(slug)}/candidates/${candidateId}/grade`, {
      method: 'PUT',
      headers: { 'content-type': 'application/json' },
      body: JSON.stringify(body),
      // Finishes even when the page is closed meanwhile.
      keepalive: true,
    })
  } catch {
    return { outcome: 'trouble', sentence: 'The server cannot be reached.' }
  }
  if (response.ok) return { outcome: 'saved' }
  if (response.status === 401) {
    return {
      outcome: 'trouble',
      sentence: 'You are signed out. Sign in again in another tab; this one goes on by itself.',
    }
  }
  if (response.status >= 500 || response.status === 429 || response.status === 408) {
    return { outcome: 'trouble', sentence: 'The server has trouble just now.' }
  }
  return { outcome: 'refused', sentence: await problemSentence(response) }
}

/** @throws Error when nothing usable comes back. */
export async function askQueue(slug: string, count: number): Promise<LentQueue> {
  const response = await fetch(`${root(slug)}/queue?count=${count}`, { cache: 'no-store' })
  if (!response.ok) throw new Error(await problemSentence(response))
  return (await response.json()) as LentQueue
}

/** Best effort: a lease that is not given back runs out by itself. */
export function giveBackQueue(slug: string, candidateIds: number[]): void {
  if (candidateIds.length === 0) return
  void fetch(`${root(slug)}/queue?candidates=${candidateIds.join(',')}`, { method: 'DELETE', keepalive: true }).catch(
    () => {},
  )
}
