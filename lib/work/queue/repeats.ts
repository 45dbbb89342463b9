import 'server-only'
import type { Kysely } from 'kysely'
import { countLooks, findMix } from '@/db/queries/mixing'
import {
  insertRepeatLooks,
  listOpenRepeats,
  listRecentLooks,
  listRepeatable,
  type RepeatCandidate,
} from '@/db/queries/repeats'
import type { QueuedCandidate } from '@/db/queries/queue'
import type { DB } from '@/db/schema'
import { kindOf } from './mix'
import { personStream, type PlaceDraw } from './person-stream'

/** So many looks lie between the first and the second at least: long enough that the first answer is not remembered (our choice). */
export const LOOKS_BETWEEN = 20
/** Of the looks before those, so many are drawn from. */
const DRAWN_FROM = 400

interface Who {
  campaignId: number
  personId: number
  now: string
}

export const repeatable = (db: Kysely<DB>, who: Who): Promise<QueuedCandidate[]> =>
  listRepeatable(db, who, { looksAgo: LOOKS_BETWEEN, limit: DRAWN_FROM })

/** What may come back to this person now, what waits for its answer among it, and what of their newest looks may later. */
export async function repeatsLeft(db: Kysely<DB>, who: Who): Promise<{ repeats: number; recent: boolean[] }> {
  const waiting = await listOpenRepeats(db, who)
  const more = await repeatable(db, who)
  return { repeats: waiting.length + more.length, recent: await listRecentLooks(db, who, LOOKS_BETWEEN) }
}

/** 1 to 7: never as it was. */
export const turnOf = ({ pick }: PlaceDraw): number => 1 + (Math.floor(pick * 6_999_993) % 7)

/** Brings candidates back. Nothing is lent: a repeated look takes no place of the wanted number. */
export async function bringBack(
  db: Kysely<DB>,
  who: Who,
  candidates: readonly { item: QueuedCandidate; draw: PlaceDraw }[],
): Promise<RepeatCandidate[]> {
  const looks = candidates.map(({ item, draw }) => ({ ...item, turned: turnOf(draw) }))
  await insertRepeatLooks(
    db,
    who,
    looks.map(({ id, turned }) => ({ candidateId: id, turned })),
    who.now,
  )
  return looks
}

/**
 * What waits for an answer, put among what the person holds at the places that were drawn for it, so that the order stays. What has no
 * place among them waits on: given back with the rest, it must not come all at once.
 */
export async function amongHeld<T extends { id: number }>(
  db: Kysely<DB>,
  who: Who,
  held: readonly T[],
): Promise<{ together: (T | RepeatCandidate)[]; waiting: RepeatCandidate[] }> {
  const { calibrationShare, repeatShare } = await findMix(db, who.campaignId)
  const waiting = repeatShare > 0 ? await listOpenRepeats(db, who) : []
  if (waiting.length === 0) return { together: [...held], waiting }
  const shares = { calibration: calibrationShare, repeat: repeatShare }
  const stream = await personStream(db, who.campaignId, who.personId)
  const place = await countLooks(db, who.campaignId, who.personId)
  const lent = [...held]
  const together: (T | RepeatCandidate)[] = []
  while (lent.length > 0) {
    const isRepeat = kindOf(stream.at(place + together.length), shares) === 'repeat'
    together.push(isRepeat && waiting.length > 0 ? waiting.shift()! : lent.shift()!)
  }
  return { together, waiting }
}
