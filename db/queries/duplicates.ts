import type { Kysely } from 'kysely'
import type { DB } from '../schema'
import { among, inCampaign } from './by-ids'
import type { WaitingFile } from './intake'

export interface DuplicateFile {
  id: number
  name: string
  /** The file in use that has the same bytes. */
  twin: { id: number; name: string }
}

/** Images in force that have the same bytes as another file, by key. */
export async function listDuplicates(
  db: Kysely<DB>,
  campaignId: number,
  afterId: number,
  limit: number,
): Promise<DuplicateFile[]> {
  const rows = await db
    .selectFrom('file')
    .innerJoin('file as twin', 'twin.id', 'file.duplicate_of')
    .select(['file.id', 'file.name', 'twin.id as twinId', 'twin.name as twinName'])
    .where('file.campaign_id', '=', campaignId)
    .where('file.fate', '=', 'duplicate')
    .where('file.kind', '=', 'fits')
    .where('file.replaced_by', 'is', null)
    .where('file.id', '>', afterId)
    .orderBy('file.id')
    .limit(limit)
    .execute()
  return rows.map(({ id, name, twinId, twinName }) => ({ id, name, twin: { id: twinId, name: twinName } }))
}

export async function setDuplicatesStored(db: Kysely<DB>, ids: readonly number[], now: string): Promise<void> {
  if (ids.length === 0) return
  await db
    .updateTable('file')
    .set({ fate: 'stored', fault: null, reason: null, duplicate_of: null, updated_at: now })
    .where('id', 'in', ids)
    .where('fate', '=', 'duplicate')
    .execute()
}

/** Whether a file of this name is in use or to be read. */
export async function hasFileOfName(db: Kysely<DB>, campaignId: number, name: string): Promise<boolean> {
  const row = await db
    .selectFrom('file')
    .select('id')
    .where('campaign_id', '=', campaignId)
    .where('name', '=', name)
    .where('replaced_by', 'is', null)
    .where('fate', 'in', ['stored', 'read', 'imaged'])
    .limit(1)
    .executeTakeFirst()
  return row !== undefined
}

/** Files that these have replaced. */
export async function listReplacedBy(db: Kysely<DB>, fileIds: readonly number[]): Promise<number[]> {
  if (fileIds.length === 0) return []
  const rows = await db.selectFrom('file').select('id').where('replaced_by', 'in', fileIds).execute()
  return rows.map(({ id }) => id)
}

/** Files in force that were refused for a band which one of these files had: back to 'stored', to be read again. */
export async function takeRefusedForBandsOf(
  db: Kysely<DB>,
  campaignId: number,
  fileIds: readonly number[],
  now: string,
): Promise<WaitingFile[]> {
  if (fileIds.length === 0) return []
  return db
    .updateTable('file')
    .set({ fate: 'stored', fault: null, reason: null, duplicate_of: null, updated_at: now })
    .where('duplicate_of', 'in', among(fileIds))
    .where(inCampaign('campaign_id', campaignId))
    .where('fate', '=', 'refused')
    .where('replaced_by', 'is', null)
    .where('kind', '=', 'fits')
    .returning(['id', 'name', 'kind', 'sha256', 'bytes', 'created_at', 'columns'])
    .execute()
}
