import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'
import type { Job } from '../schema/platform'
import { toJson } from '../schema/values'

export interface NewJob {
  kind: string
  campaignId: number | null
  /** While a job with this key is queued, another with it is not added. */
  uniqueKey: string | null
  payload: unknown
  runAfter: string
  now: string
}

/** Returns false where a job with the same key is waiting already. */
export async function insertJob(db: Kysely<DB>, job: NewJob): Promise<boolean> {
  const result = await db
    .insertInto('job')
    .values({
      kind: job.kind,
      campaign_id: job.campaignId,
      unique_key: job.uniqueKey,
      payload: toJson(job.payload),
      run_after: job.runAfter,
      lease_until: null,
      error: null,
      created_at: job.now,
      updated_at: job.now,
    })
    .onConflict((conflict) => conflict.doNothing())
    .executeTakeFirst()
  return Number(result.numInsertedOrUpdatedRows ?? 0) > 0
}

/** Takes the oldest job that is due, or one whose holder's lease ran out (a killed process), and leases it. One statement. */
export async function claimJob(db: Kysely<DB>, now: string, leaseUntil: string): Promise<Job | null> {
  const claimed = await db
    .updateTable('job')
    .set({ state: 'running', lease_until: leaseUntil, attempts: sql`attempts + 1`, updated_at: now })
    .where('id', '=', (query) =>
      query
        .selectFrom('job')
        .select('id')
        .where((e) =>
          e.or([
            e.and([e('state', '=', 'queued'), e('run_after', '<=', now)]),
            e.and([e('state', '=', 'running'), e('lease_until', '<', now)]),
          ]),
        )
        .orderBy('run_after')
        .orderBy('id')
        .limit(1),
    )
    .returningAll()
    .executeTakeFirst()
  return claimed ?? null
}

export async function setJobProgress(
  db: Kysely<DB>,
  id: number,
  progress: { done: number; total: number; leaseUntil: string; now: string },
): Promise<void> {
  await db
    .updateTable('job')
    .set({ done: progress.done, total: progress.total, lease_until: progress.leaseUntil, updated_at: progress.now })
    .where('id', '=', id)
    .execute()
}

export async function setJobDone(db: Kysely<DB>, id: number, now: string): Promise<void> {
  await db
    .updateTable('job')
    .set({ state: 'done', lease_until: null, error: null, updated_at: now })
    .where('id', '=', id)
    .execute()
}

export async function setJobRetry(
  db: Kysely<DB>,
  id: number,
  retry: { error: string; runAfter: string | null; now: string },
): Promise<void> {
  // A retry gives up its unique key: a fresh job with that key may be queued meanwhile, and jobs are idempotent.
  await db
    .updateTable('job')
    .set({
      state: retry.runAfter ? 'queued' : 'failed',
      unique_key: null,
      lease_until: null,
      error: retry.error,
      run_after: retry.runAfter ?? retry.now,
      updated_at: retry.now,
    })
    .where('id', '=', id)
    .execute()
}

export async function countUnfinishedJobs(db: Kysely<DB>, campaignId: number, kind?: string): Promise<number> {
  let query = db
    .selectFrom('job')
    .select((e) => e.fn.countAll<number>().as('n'))
    .where('campaign_id', '=', campaignId)
    .where('state', 'in', ['queued', 'running'])
  if (kind) query = query.where('kind', '=', kind)
  return (await query.executeTakeFirstOrThrow()).n
}

/** Every unfinished or failed job of a campaign, newest first, for its progress lines. */
export async function listCampaignJobs(db: Kysely<DB>, campaignId: number): Promise<Job[]> {
  return db
    .selectFrom('job')
    .selectAll()
    .where('campaign_id', '=', campaignId)
    .where('state', '!=', 'done')
    .orderBy('id', 'desc')
    .limit(100)
    .execute()
}
