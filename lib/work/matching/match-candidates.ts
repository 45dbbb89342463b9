import 'server-only'
import type { Kysely } from 'kysely'
import {
  countDue,
  deleteDue,
  deleteMatchesOf,
  deleteMatchesWithList,
  insertCandidateMatches,
  insertObjectMatches,
  listDue,
  listPlacedAfter,
} from '@/db/queries/matching'
import type { DB } from '@/db/schema'
import { unsynced } from '@/db/unsynced'
import { giveWay } from '@/lib/platform/jobs/give-way'

type Progress = (done: number, total: number) => Promise<void>

/** Some 10 to 40 ms at a time: a candidate takes 0.1 to 0.6 ms against a list of a million and 100,000 candidates. */
const PER_TRANSACTION = 60
const TOLD_EVERY = 50

/**
 * Matches every candidate of the campaign whose place has changed with its own campaign, the others and the lists in force: old
 * matches go and new ones come in one transaction, so that a kill leaves each candidate as it was or as it is. Matches follow from
 * what is there, so nothing waits for the disk.
 */
export async function matchDue(db: Kysely<DB>, campaignId: number, progress: Progress): Promise<void> {
  const total = await countDue(db, campaignId)
  for (let done = 0, step = 0; ; step++) {
    const ids = await listDue(db, campaignId, PER_TRANSACTION)
    if (ids.length === 0) return
    await unsynced(db, (connection) =>
      connection.transaction().execute(async (transaction) => {
        await deleteMatchesOf(transaction, ids)
        await insertObjectMatches(transaction, ids)
        await insertCandidateMatches(transaction, ids)
        await deleteDue(transaction, campaignId, ids)
      }),
    )
    done += ids.length
    if (step % TOLD_EVERY === 0) await progress(done, Math.max(done, total))
    await giveWay()
  }
}

/** Matches every candidate of the campaign with one list: when it comes into force, and when its radius has changed. */
export async function matchList(
  db: Kysely<DB>,
  list: { id: number; campaignId: number },
  progress: Progress,
): Promise<void> {
  for (let afterId = 0, done = 0, step = 0; ; step++) {
    const ids = await listPlacedAfter(db, list.campaignId, afterId, PER_TRANSACTION)
    const last = ids.at(-1)
    if (last === undefined) return
    await unsynced(db, (connection) =>
      connection.transaction().execute(async (transaction) => {
        await deleteMatchesWithList(transaction, ids, list.id)
        await insertObjectMatches(transaction, ids, list.id)
      }),
    )
    afterId = last
    done += ids.length
    if (step % TOLD_EVERY === 0) await progress(done, 0)
    await giveWay()
  }
}
