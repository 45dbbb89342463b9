import 'server-only'
import type { Kysely } from 'kysely'
import { listAskedCandidates } from '@/db/queries/asked-looks'
import type { QueuedCandidate } from '@/db/queries/queue'
import type { DB } from '@/db/schema'

/** Who asks for the look, and what they say to it. */
export interface AskedLook {
  id: number
  by: string
  note: string | null
}

export interface AskedCandidate extends QueuedCandidate {
  asked: AskedLook
}

/**
 * The looks that leads have asked of this person by name come before everything else, longest asked first. They are not lent:
 * an asked look keeps no place of the wanted number, so nobody else waits for it. It takes one where one is left when it is given.
 */
export async function askedLooks(
  db: Kysely<DB>,
  asker: { campaignId: number; personId: number },
  limit: number,
): Promise<AskedCandidate[]> {
  const rows = await listAskedCandidates(db, asker, limit)
  return rows.map(({ askId, askedBy, note, ...candidate }) => ({
    ...candidate,
    asked: { id: askId, by: askedBy, note },
  }))
}

/** What is lent beside the asked looks: none of them a second time. */
export function besides<T extends { id: number }>(asked: readonly { id: number }[], others: readonly T[]): T[] {
  const ids = new Set(asked.map(({ id }) => id))
  return others.filter(({ id }) => !ids.has(id))
}
