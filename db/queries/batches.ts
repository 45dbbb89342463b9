import type { Kysely } from 'kysely'
import type { DB } from '../schema'
import type { Batch, FileRow } from '../schema/intake'
import { isToBeRead } from './in-force'

/** The oldest archive that waits to be unpacked, of no paused batch. */
export async function findWaitingArchive(db: Kysely<DB>, campaignId: number): Promise<FileRow | null> {
  const row = await db
    .selectFrom('file')
    .innerJoin('batch', 'batch.id', 'file.batch_id')
    .selectAll('file')
    .where('file.campaign_id', '=', campaignId)
    .where('file.kind', '=', 'archive')
    .where('file.fate', '=', 'stored')
    .where('file.replaced_by', 'is', null)
    .where('batch.state', '=', 'open')
    .orderBy('file.id')
    .limit(1)
    .executeTakeFirst()
  return row ?? null
}

/** Whether an archive is still to be unpacked: not cancelled, replaced or paused meanwhile. */
export async function isStillWaiting(db: Kysely<DB>, fileId: number): Promise<boolean> {
  const row = await db
    .selectFrom('file')
    .innerJoin('batch', 'batch.id', 'file.batch_id')
    .select('file.id')
    .where('file.id', '=', fileId)
    .where('file.fate', '=', 'stored')
    .where('file.replaced_by', 'is', null)
    .where('batch.state', '=', 'open')
    .executeTakeFirst()
  return row !== undefined
}

/** Names of what has come out of an archive already. */
export async function listMemberNames(db: Kysely<DB>, archiveId: number): Promise<Set<string>> {
  const rows = await db.selectFrom('file').select('name').where('archive_id', '=', archiveId).execute()
  return new Set(rows.map(({ name }) => name))
}

export interface ListedBatch {
  id: number
  name: string
  state: Batch['state']
  /** Files not yet read. */
  waiting: number
}

/** The batches that have files to be read, and those that are paused; the newest first. */
export async function listUnfinishedBatches(db: Kysely<DB>, campaignId: number): Promise<ListedBatch[]> {
  return db
    .selectFrom('batch')
    .leftJoin(
      (e) =>
        e
          .selectFrom('file')
          .select((f) => ['batch_id', f.fn.countAll<number>().as('waiting')])
          .where('campaign_id', '=', campaignId)
          .where('fate', '=', 'stored')
          .where(isToBeRead)
          .groupBy('batch_id')
          .as('stored'),
      (join) => join.onRef('stored.batch_id', '=', 'batch.id'),
    )
    .select((e) => ['batch.id', 'batch.name', 'batch.state', e.fn.coalesce('stored.waiting', e.lit(0)).as('waiting')])
    .where('batch.campaign_id', '=', campaignId)
    .where((e) => e.or([e('batch.state', '=', 'paused'), e('stored.waiting', '>', 0)]))
    .orderBy('batch.id', 'desc')
    .limit(20)
    .execute()
}

export async function findBatch(db: Kysely<DB>, campaignId: number, id: number): Promise<Batch | null> {
  const row = await db
    .selectFrom('batch')
    .selectAll()
    .where('campaign_id', '=', campaignId)
    .where('id', '=', id)
    .executeTakeFirst()
  return row ?? null
}

export async function setBatchState(db: Kysely<DB>, id: number, state: Batch['state']): Promise<void> {
  await db.updateTable('batch').set({ state }).where('id', '=', id).execute()
}

/** Every file of a batch that is still to be read is refused with this reason. Returns their ids. */
export async function refuseWaitingOfBatch(
  db: Kysely<DB>,
  batchId: number,
  to: { fault: string; reason: string },
  now: string,
): Promise<number[]> {
  const rows = await db
    .updateTable('file')
    .set({ fate: 'refused', fault: to.fault, reason: to.reason, updated_at: now })
    .where('batch_id', '=', batchId)
    .where('fate', '=', 'stored')
    .returning('id')
    .execute()
  return rows.map(({ id }) => id)
}

export async function findNewestBatch(
  db: Kysely<DB>,
  campaignId: number,
  personId: number,
  since: string,
): Promise<Batch | null> {
  const row = await db
    .selectFrom('batch')
    .selectAll()
    .where('campaign_id', '=', campaignId)
    .where('created_by', '=', personId)
    .where('created_at', '>=', since)
    .orderBy('id', 'desc')
    .limit(1)
    .executeTakeFirst()
  return row ?? null
}

export async function findBatchByName(db: Kysely<DB>, campaignId: number, name: string): Promise<Batch | null> {
  const row = await db
    .selectFrom('batch')
    .selectAll()
    .where('campaign_id', '=', campaignId)
    .where('name', '=', name)
    .orderBy('id', 'desc')
    .limit(1)
    .executeTakeFirst()
  return row ?? null
}

export async function insertBatch(
  db: Kysely<DB>,
  batch: { campaignId: number; name: string; personId: number; now: string },
): Promise<number> {
  const row = await db
    .insertInto('batch')
    .values({ campaign_id: batch.campaignId, name: batch.name, created_by: batch.personId, created_at: batch.now })
    .returning('id')
    .executeTakeFirstOrThrow()
  return row.id
}
