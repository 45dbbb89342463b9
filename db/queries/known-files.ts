import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'
import type { FileRow } from '../schema/intake'
import { isPaintedFile } from './painted-names'

export type FileOfName = Pick<FileRow, 'name' | 'sha256' | 'bytes' | 'fate' | 'fault'>

/** The files in force of these names, as they were delivered: none that was made here. */
export async function listFilesByName(
  db: Kysely<DB>,
  campaignId: number,
  names: readonly string[],
): Promise<FileOfName[]> {
  if (names.length === 0) return []
  return db
    .selectFrom('file')
    .select(['name', 'sha256', 'bytes', 'fate', 'fault'])
    .where('campaign_id', '=', campaignId)
    .where('name', 'in', sql<string>`(select value from json_each(${JSON.stringify(names)}))`)
    .where('replaced_by', 'is', null)
    .where((e) => e.not(isPaintedFile('file.id')))
    .execute()
}

/** Of these files, the ones that are to be read now: not cancelled or replaced meanwhile, of no paused batch. */
export async function listReadable(db: Kysely<DB>, ids: readonly number[]): Promise<Set<number>> {
  const rows = await db
    .selectFrom('file')
    .innerJoin('batch', 'batch.id', 'file.batch_id')
    .select('file.id')
    .where('file.id', 'in', sql<number>`(select value from json_each(${JSON.stringify(ids)}))`)
    .where('file.fate', '=', 'stored')
    .where('batch.state', '=', 'open')
    .execute()
  return new Set(rows.map(({ id }) => id))
}
