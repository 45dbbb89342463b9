import type { Kysely } from 'kysely'
import type { DB } from '@/db/schema'
import { enqueueJob } from './enqueue-job'
import { JOB } from './job-kinds'

/**
 * Asks for a consensus run of the campaign; while one waits, asking again adds nothing. Here and not in the consensus room, so
 * that every room can ask, with the same kind, key and payload. The caller holds a permit and calls it in its transaction.
 */
export async function requestConsensus(db: Kysely<DB>, campaignId: number, delayMs = 0): Promise<void> {
  await enqueueJob(db, {
    kind: JOB.consensus,
    campaignId,
    uniqueKey: `${JOB.consensus}:${campaignId}`,
    payload: { campaignId },
    delayMs,
  })
}
