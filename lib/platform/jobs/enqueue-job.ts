import type { Kysely } from 'kysely'
import { insertJob } from '@/db/queries/jobs'
import type { DB } from '@/db/schema'
import { isoTime } from '../clock'

/**
 * Adds a job row; call it inside the transaction whose effect the job completes. With a unique key, a job of that key that
 * still waits makes this a no-op (one that already runs does not: it may have read the state before this change).
 */
export async function enqueueJob(
  db: Kysely<DB>,
  job: { kind: string; campaignId?: number | null; uniqueKey?: string; payload?: unknown; delayMs?: number },
): Promise<boolean> {
  return insertJob(db, {
    kind: job.kind,
    campaignId: job.campaignId ?? null,
    uniqueKey: job.uniqueKey ?? null,
    payload: job.payload ?? {},
    runAfter: isoTime(job.delayMs ?? 0),
    now: isoTime(),
  })
}
