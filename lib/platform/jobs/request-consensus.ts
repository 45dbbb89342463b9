import type { Kysely } from 'kysely'
import type { DB } from '@/db/schema'
import { bringJobForward } from '@/db/queries/jobs'
import { isoTime } from '../clock'
import { enqueueJob } from './enqueue-job'
import { JOB } from './job-kinds'

/**
 * Asks for a consensus run of the campaign; while one waits, asking again adds nothing but brings it forward. Here and not in
 * the consensus room, so that every room can ask, with the same kind, key and payload. The caller holds a permit and calls it
 * in its transaction.
 */
export async function requestConsensus(db: Kysely<DB>, campaignId: number, delayMs = 0): Promise<void> {
  const uniqueKey = `${JOB.consensus}:${campaignId}`
  const added = await enqueueJob(db, { kind: JOB.consensus, campaignId, uniqueKey, payload: { campaignId }, delayMs })
  if (!added) await bringJobForward(db, uniqueKey, isoTime(delayMs))
}
