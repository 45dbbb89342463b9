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
      holder: null,
      error: null,
      created_at: job.now,
      updated_at: job.now,
    })
    .onConflict((conflict) => conflict.doNothing())
    .executeTakeFirst()
  return Number(result.numInsertedOrUpdatedRows ?? 0) > 0
}

/** A queued job of this key is due at this time, if it was not earlier. */
export async function bringJobForward(db: Kysely<DB>, uniqueKey: string, runAfter: string): Promise<void> {
  await db
    .updateTable('job')
    .set({ run_after: runAfter })
    .where('unique_key', '=', uniqueKey)
    .where('state', '=', sql.lit('queued'))
    .where('run_after', '>', runAfter)
    .execute()
}

/**
 * Takes the oldest job of these kinds that is due, or one whose holder's lease ran out (a killed process), and leases it. One
 * statement.
 */
export async function claimJob(
  db: Kysely<DB>,
  claim: { kinds: readonly string[]; now: string; leaseUntil: string; holder?: string | null },
): Promise<Job | null> {
  const { kinds, now, leaseUntil, holder = null } = claim
  const claimed = await db
    .updateTable('job')
    .set({ state: 'running', lease_until: leaseUntil, holder, attempts: sql`attempts + 1`, updated_at: now })
    .where('id', '=', (query) =>
      query
        .selectFrom('job')
        .select('id')
        .where('kind', 'in', kinds)
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

/** A job in somebody's hands, known by the lease as the holder wrote it last. */
export interface Claim {
  id: number
  leaseUntil: string
}

/** What a holder may write: nothing, once its lease ran out and another has taken the job. */
function heldBy(db: Kysely<DB>, claim: Claim) {
  return db
    .updateTable('job')
    .where('id', '=', claim.id)
    .where('state', '=', 'running')
    .where('lease_until', '=', claim.leaseUntil)
}

/** Renews the lease; getting on with the work takes back what attempts were counted. Returns false where it is no longer held. */
export async function setJobProgress(
  db: Kysely<DB>,
  claim: Claim,
  progress: { done: number; total: number; leaseUntil: string; now: string },
): Promise<boolean> {
  const result = await heldBy(db, claim)
    .set({ done: progress.done, total: progress.total, lease_until: progress.leaseUntil, updated_at: progress.now })
    .$if(progress.done > 0, (query) => query.set({ attempts: 0 }))
    .executeTakeFirst()
  return result.numUpdatedRows > 0n
}

export async function setJobDone(db: Kysely<DB>, claim: Claim, now: string): Promise<void> {
  await heldBy(db, claim).set({ state: 'done', lease_until: null, error: null, updated_at: now }).execute()
}

/** After a failure. `runAfter` null gives the job up. */
export async function setJobRetry(
  db: Kysely<DB>,
  claim: Claim,
  retry: { attempts: number; error: string; runAfter: string | null; now: string },
): Promise<void> {
  // A retry gives up its unique key: a fresh job with that key may be queued meanwhile, and jobs are idempotent.
  await heldBy(db, claim)
    .set({
      state: retry.runAfter ? 'queued' : 'failed',
      attempts: retry.attempts,
      unique_key: null,
      lease_until: null,
      error: retry.error,
      run_after: retry.runAfter ?? retry.now,
      updated_at: retry.now,
    })
    .execute()
}

/** Gives a job back unfinished, to be taken at once by whoever comes: the process is being stopped. It is no attempt. */
export async function giveBackJob(db: Kysely<DB>, claim: Claim, now: string): Promise<void> {
  await heldBy(db, claim)
    .set({ state: 'queued', attempts: 0, unique_key: null, lease_until: null, run_after: now, updated_at: now })
    .execute()
}

/** Who has jobs in hand, as far as they gave a name. */
export async function listJobHolders(db: Kysely<DB>): Promise<string[]> {
  const rows = await db
    .selectFrom('job')
    .select('holder')
    .distinct()
    .where('state', '=', 'running')
    .where('holder', 'is not', null)
    .execute()
  return rows.flatMap(({ holder }) => holder ?? [])
}

/** Puts back what a holder that died had in hand, the attempt counted. Returns how many jobs. */
export async function freeJobsOf(db: Kysely<DB>, holder: string, now: string): Promise<number> {
  const result = await db
    .updateTable('job')
    .set({ state: 'queued', unique_key: null, lease_until: null, run_after: now, updated_at: now })
    .where('state', '=', 'running')
    .where('holder', '=', holder)
    .executeTakeFirst()
  return Number(result.numUpdatedRows)
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
