import 'server-only'
import type { Kysely } from 'kysely'
import type { DB } from '@/db/schema'
import { enqueueJob } from '@/lib/platform/jobs/enqueue-job'
import { JOB } from '@/lib/platform/jobs/job-kinds'

export interface ReadFilesPayload {
  campaignId: number
  /** Also try files again that could not be matched: the name pattern has changed. */
  unmatchedAgain?: boolean
}

/** So long a job waits, so that one does for all files that come in a row. */
const GATHER_MS = 250

/** Asks for the stored files of a campaign to be read. One waiting job does for any number of files. */
export async function requestReading(db: Kysely<DB>, campaignId: number): Promise<void> {
  const payload: ReadFilesPayload = { campaignId }
  const uniqueKey = `${JOB.readFiles}:${campaignId}`
  await enqueueJob(db, { kind: JOB.readFiles, campaignId, uniqueKey, payload, delayMs: GATHER_MS })
}

/** Asks for the stored archives of a campaign to be unpacked. */
export async function requestUnpacking(db: Kysely<DB>, campaignId: number): Promise<void> {
  const uniqueKey = `${JOB.unpackArchives}:${campaignId}`
  await enqueueJob(db, { kind: JOB.unpackArchives, campaignId, uniqueKey, payload: { campaignId } })
}
