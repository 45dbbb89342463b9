/** What the sheet says to the server. */
import type { PERSON_HEADER } from '@/lib/work/people/person-header'
import type { LentSheet } from '@/lib/work/sheet/lend-sheet'
import type { MarkInput } from '@/lib/work/sheet/mark-input'
import type { RecordedMarks } from '@/lib/work/sheet/record-marks'
import type { PassersProgress } from '@/lib/work/sheet/sheet-progress'

export interface SheetOwner {
  slug: string
  personId: number
}

/** Typed by the server's constant, so that the two cannot differ. */
const HEADER: typeof PERSON_HEADER = 'ringside-person'
const ANSWER_MS = 30_000

const address = ({ slug }: SheetOwner) => `/api/campaigns/${encodeURIComponent(slug)}/sheet`
const whose = ({ personId }: SheetOwner) => ({ [HEADER]: String(personId) })

async function sentenceOf(response: Response): Promise<string> {
  if (response.status === 401) return 'You are signed out. Marks are kept here and go once you are signed in again.'
  const body = (await response.json().catch(() => null)) as { detail?: unknown } | null
  return typeof body?.detail === 'string' ? body.detail : `The server answered ${response.status}.`
}

/** @throws Error with a sentence when nothing usable comes back. */
async function answerOf<T>(asked: Promise<Response>): Promise<T> {
  const response = await asked.catch(() => {
    throw new Error('The server cannot be reached.')
  })
  if (!response.ok) throw new Error(await sentenceOf(response))
  return (await response.json()) as T
}

export const askSheet = (owner: SheetOwner, count: number) =>
  answerOf<LentSheet & { progress: PassersProgress }>(
    fetch(`${address(owner)}?count=${count}`, { cache: 'no-store', headers: whose(owner) }),
  )

export const sendMarks = (owner: SheetOwner, marks: readonly MarkInput[]) =>
  answerOf<RecordedMarks & { progress: PassersProgress }>(
    fetch(address(owner), {
      method: 'POST',
      headers: { 'content-type': 'application/json', ...whose(owner) },
      body: JSON.stringify({ marks }),
      // Finishes even when the page is closed meanwhile.
      keepalive: true,
      signal: AbortSignal.timeout(ANSWER_MS),
    }),
  )

/** Best effort: what is not given back runs out by itself. */
export function giveBackSheet(owner: SheetOwner): void {
  void fetch(address(owner), { method: 'DELETE', keepalive: true, headers: whose(owner) }).catch(() => {})
}
