import type { Kysely } from 'kysely'
import type { DB } from '@/db/schema'
import { enqueueJob } from './enqueue-job'
import { JOB } from './job-kinds'

/**
 * Asks for candidates whose place has changed to be matched: the database itself notes which (`match_due`). Here and not in the
 * matching room, so that intake can ask. Call it in the transaction that changes positions.
 */
export async function requestMatching(db: Kysely<DB>, campaignId: number, delayMs = 0): Promise<void> {
  const uniqueKey = `${JOB.matchCandidates}:${campaignId}`
  await enqueueJob(db, { kind: JOB.matchCandidates, campaignId, uniqueKey, payload: { campaignId }, delayMs })
}
