import type { Kysely } from 'kysely'
import type { DB } from '../schema'
import type { ManifestRow } from '../schema/intake'

/** The manifest lines in force (of manifests that were not replaced) for files with these base names. */
export async function listManifestRowsOfBases(
  db: Kysely<DB>,
  campaignId: number,
  bases: readonly string[],
): Promise<ManifestRow[]> {
  if (bases.length === 0) return []
  return manifestRows(db, campaignId).where('manifest_row.file_base', 'in', bases).execute()
}

export async function listManifestRowsOfCandidates(
  db: Kysely<DB>,
  campaignId: number,
  names: readonly string[],
): Promise<ManifestRow[]> {
  if (names.length === 0) return []
  return manifestRows(db, campaignId).where('manifest_row.candidate', 'in', names).execute()
}

function manifestRows(db: Kysely<DB>, campaignId: number) {
  return db
    .selectFrom('manifest_row')
    .innerJoin('file', 'file.id', 'manifest_row.file_id')
    .selectAll('manifest_row')
    .where('manifest_row.campaign_id', '=', campaignId)
    .where('file.replaced_by', 'is', null)
}

export async function hasManifestRows(db: Kysely<DB>, campaignId: number): Promise<boolean> {
  const row = await db
    .selectFrom('manifest_row')
    .select('id')
    .where('campaign_id', '=', campaignId)
    .limit(1)
    .executeTakeFirst()
  return row !== undefined
}

export async function deleteManifestRows(db: Kysely<DB>, fileId: number): Promise<void> {
  await db.deleteFrom('manifest_row').where('file_id', '=', fileId).execute()
}

export type NewManifestRow = Omit<ManifestRow, 'id'>

export async function insertManifestRows(db: Kysely<DB>, rows: readonly NewManifestRow[]): Promise<void> {
  if (rows.length > 0) await db.insertInto('manifest_row').values(rows).execute()
}

/** Lines of one manifest, by key. */
export async function listManifestRows(
  db: Kysely<DB>,
  fileId: number,
  afterId: number,
  limit: number,
): Promise<ManifestRow[]> {
  return db
    .selectFrom('manifest_row')
    .selectAll()
    .where('file_id', '=', fileId)
    .where('id', '>', afterId)
    .orderBy('id')
    .limit(limit)
    .execute()
}
