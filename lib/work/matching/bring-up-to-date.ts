import 'server-only'
import type { Kysely } from 'kysely'
import { countDue, listUnmatchedLists } from '@/db/queries/matching'
import type { DB } from '@/db/schema'
import { requestMatching } from '@/lib/platform/jobs/request-matching'
import { conflict } from '@/lib/platform/problems/problem'
import { matchDue } from './match-candidates'

/** About a second's work; what is more is left to the job. */
const MOST_AT_ONCE = 2000

/**
 * Matches the candidates of a campaign that still wait for it, so that what is published next names every known object.
 * @throws Problem 409 `being-matched` where that takes longer: it is asked for, and a moment later there is nothing to wait for.
 */
export async function bringUpToDate(db: Kysely<DB>, campaignId: number): Promise<void> {
  const due = await countDue(db, campaignId)
  if (due > MOST_AT_ONCE) {
    await requestMatching(db, campaignId)
    throw conflict(
      'being-matched',
      `${due.toLocaleString('en')} candidates are still being compared with known objects. Publish when that is done.`,
    )
  }
  await matchDue(db, campaignId, async () => {})
}

/**
 * Whether every candidate is matched with every list in force, asked in the transaction that relies on it: false where some came since.
 * @throws Problem 409 `being-matched` naming a list that is being read or matched, or whose matching failed.
 */
export async function isUpToDate(db: Kysely<DB>, campaignId: number): Promise<boolean> {
  const [list] = await listUnmatchedLists(db, campaignId)
  if (list) {
    throw conflict('being-matched', whyNot(list))
  }
  return (await countDue(db, campaignId)) === 0
}

function whyNot({ name, state, hasFailed }: { name: string; state: string; hasFailed: boolean }): string {
  if (state === 'reading') {
    return hasFailed
      ? `The list ${name} was not read to its end. Take it in again, or retire it; then publish.`
      : `The known objects of ${name} are still being read. Publish when that is done.`
  }
  return hasFailed
    ? `Candidates could not be compared with the known objects of ${name}. Change its radius so that it is tried again, or retire it; then publish.`
    : `The known objects of ${name} are still being compared with the candidates. Publish when that is done.`
}
