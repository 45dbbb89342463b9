import 'server-only'
import type { Kysely } from 'kysely'
import type { DB } from '@/db/schema'
import { enqueueJob } from '@/lib/platform/jobs/enqueue-job'
import { JOB } from '@/lib/platform/jobs/job-kinds'

/** The payload and key of a consensus job; rooms above this one enqueue it by its kind with the same two. */
export const consensusJobKey = (campaignId: number) => `${JOB.consensus}:${campaignId}`

/** Asks for a consensus run of the campaign; while one waits, asking again adds nothing. The caller holds a permit. */
export async function requestConsensus(db: Kysely<DB>, campaignId: number): Promise<void> {
  await enqueueJob(db, {
    kind: JOB.consensus,
    campaignId,
    uniqueKey: consensusJobKey(campaignId),
    payload: { campaignId },
  })
}
