import { sql, type Kysely, type SqlBool } from 'kysely'
import type { DB } from '../schema'
import type { FileFate, FileRow } from '../schema/intake'
import { inForce, isToBeRead } from './in-force'

export async function findFileByContent(
  db: Kysely<DB>,
  campaignId: number,
  sha256: string,
  name: string,
): Promise<FileRow | null> {
  const row = await db
    .selectFrom('file')
    .selectAll()
    .where('campaign_id', '=', campaignId)
    .where('sha256', '=', sha256)
    .where('name', '=', name)
    .executeTakeFirst()
  return row ?? null
}

/** A file in use with these bytes, under any name. Looked for by the bytes: by fate, SQLite would read the whole campaign. */
export async function findFileInUse(
  db: Kysely<DB>,
  campaignId: number,
  sha256: string,
  kind: FileRow['kind'],
): Promise<FileRow | null> {
  const row = await db
    .selectFrom('file')
    .selectAll()
    .where('campaign_id', '=', campaignId)
    .where('sha256', '=', sha256)
    .where('kind', '=', kind)
    .where(sql<SqlBool>`+fate in ('stored', 'read', 'imaged')`)
    .where('replaced_by', 'is', null)
    .orderBy('id')
    .limit(1)
    .executeTakeFirst()
  return row ?? null
}

export async function insertFile(
  db: Kysely<DB>,
  file: {
    campaignId: number
    batchId: number
    name: string
    kind: FileRow['kind']
    sha256: string
    bytes: number
    fate: FileFate
    reason: string | null
    duplicateOf: number | null
    personId: number
    archiveId?: number | null
    columns?: FileRow['columns']
    now: string
  },
): Promise<FileRow> {
  return db
    .insertInto('file')
    .values({
      campaign_id: file.campaignId,
      batch_id: file.batchId,
      name: file.name,
      kind: file.kind,
      sha256: file.sha256,
      bytes: file.bytes,
      fate: file.fate,
      fault: null,
      reason: file.reason,
      duplicate_of: file.duplicateOf,
      replaced_by: null,
      created_by: file.personId,
      created_at: file.now,
      updated_at: file.now,
      archive_id: file.archiveId ?? null,
      columns: file.columns ?? null,
    })
    .returningAll()
    .executeTakeFirstOrThrow()
}

/** Every other file of this name gives way to `fileId`. Returns the ids of those that were in use. */
export async function replaceOthersOfName(
  db: Kysely<DB>,
  campaignId: number,
  name: string,
  fileId: number,
  now: string,
): Promise<number[]> {
  const others = await db
    .selectFrom('file')
    .select(['id', 'replaced_by'])
    .where('campaign_id', '=', campaignId)
    .where('name', '=', name)
    .where('id', '!=', fileId)
    .execute()
  if (others.length === 0) return []
  const ids = others.map(({ id }) => id)
  await db.updateTable('file').set({ replaced_by: fileId }).where('id', 'in', ids).execute()
  const inUse = others.filter((other) => other.replaced_by === null).map(({ id }) => id)
  // The time of those that were replaced before stays, so that the last in use can be told.
  if (inUse.length > 0) await db.updateTable('file').set({ updated_at: now }).where('id', 'in', inUse).execute()
  return inUse
}

/** Back to 'stored', to be read again. */
export async function setFileStored(db: Kysely<DB>, id: number, reason: string | null, now: string): Promise<void> {
  await db
    .updateTable('file')
    .set({ fate: 'stored', fault: null, reason, duplicate_of: null, replaced_by: null, updated_at: now })
    .where('id', '=', id)
    .execute()
}

export async function setFileColumns(db: Kysely<DB>, id: number, columns: FileRow['columns']): Promise<void> {
  await db.updateTable('file').set({ columns }).where('id', '=', id).execute()
}

/**
 * What was a duplicate of files that are no longer in use stands for itself again, and so does what was refused because they had
 * its band.
 */
export async function releaseDuplicates(db: Kysely<DB>, fileIds: readonly number[], now: string): Promise<void> {
  if (fileIds.length === 0) return
  await db
    .updateTable('file')
    .set({ fate: 'stored', fault: null, reason: null, duplicate_of: null, updated_at: now })
    .where('duplicate_of', 'in', fileIds)
    .where('fate', 'in', ['duplicate', 'refused'])
    .where(inForce(['refused', 'duplicate'], ['stored', 'read', 'imaged']))
    .execute()
}

/** Refused files that are in force become 'stored' again. `faults` null means any fault. Returns how many. */
export async function setRefusedStored(
  db: Kysely<DB>,
  campaignId: number,
  faults: readonly string[] | null,
  now: string,
): Promise<number> {
  let query = db
    .updateTable('file')
    .set({ fate: 'stored', fault: null, reason: null, updated_at: now })
    .where('campaign_id', '=', campaignId)
    .where('fate', '=', 'refused')
    .where('replaced_by', 'is', null)
  if (faults) query = query.where('fault', 'in', faults)
  return Number((await query.executeTakeFirst()).numUpdatedRows)
}

export type WaitingFile = Pick<FileRow, 'id' | 'name' | 'kind' | 'sha256' | 'bytes' | 'created_at' | 'columns'>

/** Files of a paused batch wait until it goes on. */
const inOpenBatch = sql<SqlBool>`file.batch_id not in (select id from batch where state = 'paused')`

/** Files to be read, oldest first: not replaced, or replaced by one that was refused; of no paused batch. */
export async function listWaitingFiles(
  db: Kysely<DB>,
  campaignId: number,
  kind: FileRow['kind'],
  afterId: number,
  limit: number,
): Promise<WaitingFile[]> {
  return db
    .selectFrom('file')
    .select(['id', 'name', 'kind', 'sha256', 'bytes', 'created_at', 'columns'])
    .where('campaign_id', '=', campaignId)
    .where('fate', '=', 'stored')
    .where('kind', '=', kind)
    .where('id', '>', afterId)
    .where(inOpenBatch)
    .where(isToBeRead)
    .orderBy('id')
    .limit(limit)
    .execute()
}

export async function countWaitingFiles(db: Kysely<DB>, campaignId: number): Promise<number> {
  const row = await db
    .selectFrom('file')
    .select((e) => e.fn.countAll<number>().as('n'))
    .where('campaign_id', '=', campaignId)
    .where('fate', '=', 'stored')
    .where('kind', '!=', 'archive')
    .where(inOpenBatch)
    .where(isToBeRead)
    .executeTakeFirstOrThrow()
  return row.n
}

/** When the newest file of a campaign came, or null. Asked batch by batch, which takes one step of an index each. */
export async function newestDelivery(db: Kysely<DB>, campaignId: number): Promise<string | null> {
  const newest = sql<number>`(select max((select max(id) from file of_batch where of_batch.batch_id = batch.id))
    from batch where batch.campaign_id = ${campaignId})`
  const row = await db.selectFrom('file').select('created_at').where('id', '=', newest).executeTakeFirst()
  return row?.created_at ?? null
}

/** Why a file was not read that another of its name has replaced at once. */
const NOT_NEEDED = 'A newer file of this name came before this one was read.'

export interface FileFateUpdate {
  fate: FileFate
  fault: string | null
  reason: string | null
  duplicateOf: number | null
}

/** Files of the same names that were replaced before they were read need not be read any more: they are settled with these. */
export async function setFileFates(
  db: Kysely<DB>,
  ids: readonly number[],
  to: FileFateUpdate,
  now: string,
): Promise<void> {
  if (ids.length === 0) return
  await db
    .updateTable('file')
    .set({ fate: to.fate, fault: to.fault, reason: to.reason, duplicate_of: to.duplicateOf, updated_at: now })
    .where('id', 'in', ids)
    .execute()
  if (to.fate !== 'stored' && to.fate !== 'refused') await settleReplaced(db, ids, now)
}

async function settleReplaced(db: Kysely<DB>, ids: readonly number[], now: string): Promise<void> {
  const settled = { fate: 'duplicate', fault: null, reason: NOT_NEEDED, duplicate_of: null, updated_at: now } as const
  // Each by the index on replaced_by: this is done for every file that is read.
  await db
    .updateTable('file')
    .set(settled)
    .where('replaced_by', 'in', ids)
    .where(sql<SqlBool>`+fate = 'stored'`)
    .execute()
  // These were read in the stead of a newer file that was refused: so earlier ones that it replaced too need not be read.
  const stead = await db
    .selectFrom('file')
    .select(['id', 'replaced_by'])
    .where('id', 'in', ids)
    .where('replaced_by', 'is not', null)
    .execute()
  for (const { id, replaced_by } of stead) {
    await db
      .updateTable('file')
      .set(settled)
      .where('replaced_by', '=', replaced_by)
      .where('id', '<', id)
      .where(sql<SqlBool>`+fate = 'stored'`)
      .execute()
  }
}

/** Of these files, the ones that are still to be read, paused or not. */
export async function listStillWaiting(db: Kysely<DB>, ids: readonly number[]): Promise<Set<number>> {
  if (ids.length === 0) return new Set()
  const rows = await db.selectFrom('file').select('id').where('id', 'in', ids).where('fate', '=', 'stored').execute()
  return new Set(rows.map(({ id }) => id))
}

export interface ListedFile {
  id: number
  name: string
  kind: FileRow['kind']
  sha256: string
  bytes: number
  fate: FileFate
  fault: string | null
  reason: string | null
  batch: string
  replacedBy: number | null
  duplicateOf: string | null
  createdAt: string
  updatedAt: string
}

export interface FilePageFilter {
  fate?: FileFate
  /** Leaves this fate out. */
  notFate?: FileFate
  /** Part of the name, any case. */
  search?: string
  afterId: number
  limit: number
}

const FATES: readonly FileFate[] = ['stored', 'read', 'imaged', 'duplicate', 'refused']

/** A page of files by key. Each fate is read by its index in order, so that no page sorts the whole campaign. */
export async function listFiles(db: Kysely<DB>, campaignId: number, filter: FilePageFilter): Promise<ListedFile[]> {
  const { fate, notFate, limit } = filter
  const wanted = FATES.filter((one) => one !== notFate && (fate === undefined || one === fate))
  const [first, ...others] = wanted.map((one) => db.selectFrom(filesOfFate(db, campaignId, one, filter)).selectAll())
  if (!first) return []
  const together = others.reduce((all, next) => all.unionAll(next), first)
  return together.orderBy('id').limit(limit).execute()
}

function filesOfFate(db: Kysely<DB>, campaignId: number, fate: FileFate, { search, afterId, limit }: FilePageFilter) {
  let query = db
    .selectFrom('file')
    .innerJoin('batch', 'batch.id', 'file.batch_id')
    .leftJoin('file as original', 'original.id', 'file.duplicate_of')
    .select([
      'file.id',
      'file.name',
      'file.kind',
      'file.sha256',
      'file.bytes',
      'file.fate',
      'file.fault',
      'file.reason',
      'batch.name as batch',
      'file.replaced_by as replacedBy',
      'original.name as duplicateOf',
      'file.created_at as createdAt',
      'file.updated_at as updatedAt',
    ])
    .where('file.campaign_id', '=', campaignId)
    .where('file.fate', '=', fate)
    .where('file.id', '>', afterId)
  if (search) query = query.where(sql<SqlBool>`instr(lower(file.name), ${search.toLowerCase()}) > 0`)
  return query.orderBy('file.id').limit(limit).as('part')
}

/** How many files have which fate; a file that waits to be read while a newer one of its name is here is not counted. */
export async function countFates(db: Kysely<DB>, campaignId: number): Promise<Record<FileFate, number>> {
  const rows = await db
    .selectFrom('file')
    .select((e) => ['fate', e.fn.countAll<number>().as('n')])
    .where('campaign_id', '=', campaignId)
    .where((e) => e.or([e('fate', '!=', 'stored'), isToBeRead]))
    .groupBy('fate')
    .execute()
  const counts: Record<FileFate, number> = { stored: 0, read: 0, imaged: 0, duplicate: 0, refused: 0 }
  for (const { fate, n } of rows) counts[fate] = n
  return counts
}
