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

/** Why nothing usable came back. */
export class SheetTrouble extends Error {
  constructor(
    readonly sentence: string,
    /** Signing in mends it. */
    readonly signIn = false,
    /** It is about what was sent: sending it again will not help. */
    readonly final = false,
  ) {
    super(sentence)
  }
}

async function troubleOf(response: Response): Promise<SheetTrouble> {
  if (response.status === 401) {
    return new SheetTrouble('You are signed out. Marks are kept here and go once you are signed in again.', true)
  }
  const body = (await response.json().catch(() => null)) as { type?: unknown; detail?: unknown } | null
  const sentence = typeof body?.detail === 'string' ? body.detail : `The server answered ${response.status}.`
  const ours = typeof body?.type === 'string' && body.type.startsWith('urn:ringside:')
  return new SheetTrouble(sentence, false, ours && response.status === 422)
}

/** @throws SheetTrouble when nothing usable comes back. */
async function answerOf<T>(asked: Promise<Response>, isWhole: (answer: T) => boolean): Promise<T> {
  const response = await asked.catch(() => {
    throw new SheetTrouble('The server cannot be reached.')
  })
  if (!response.ok) throw await troubleOf(response)
  const answer = (await response.json().catch(() => null)) as T | null
  // The sign-in page of a hotel's network answers 200 as well.
  if (!answer || !isWhole(answer)) throw new SheetTrouble('Something else than Ringside answers under its address.')
  return answer
}

export const askSheet = (owner: SheetOwner, count: number) =>
  answerOf<LentSheet & { progress: PassersProgress }>(
    fetch(`${address(owner)}?count=${count}`, { cache: 'no-store', headers: whose(owner) }),
    ({ stamps }) => Array.isArray(stamps),
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
    ({ saved, refused }) => Array.isArray(saved) && Array.isArray(refused),
  )

/** Best effort: what is not given back runs out by itself. */
export function giveBackSheet(owner: SheetOwner, ids: readonly number[]): void {
  if (ids.length === 0) return
  void fetch(`${address(owner)}?candidates=${ids.join(',')}`, {
    method: 'DELETE',
    keepalive: true,
    headers: whose(owner),
  }).catch(() => {})
}
