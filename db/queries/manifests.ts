import { sql, type Kysely, type SqlBool } from 'kysely'
import type { DB } from '../schema'
import type { ManifestRow } from '../schema/intake'

/**
 * A manifest stays in force until a newer one of its name is read: not while that one waits, nor when it is refused. Of several
 * that were replaced, the one that was in use last. `reading` is the manifest that is taken now: it counts as read.
 */
const inForce = (reading: number | null) => sql<SqlBool>`(
  file.replaced_by is null
  or (
    file.replaced_by is not ${reading}
    and file.fate = 'read'
    and (select newer.fate from file newer where newer.id = file.replaced_by) in ('stored', 'refused', 'duplicate')
    and not exists (
      select 1 from file later
      where later.replaced_by = file.replaced_by and later.id != file.id and later.fate = 'read'
        and (later.updated_at, later.id) > (file.updated_at, file.id)
    )
  )
)`

/** The manifest lines in force for files with these base names. */
export async function listManifestRowsOfBases(
  db: Kysely<DB>,
  campaignId: number,
  bases: readonly string[],
  reading: number | null = null,
): Promise<ManifestRow[]> {
  if (bases.length === 0) return []
  return manifestRows(db, campaignId, reading).where('manifest_row.file_base', 'in', bases).execute()
}

export async function listManifestRowsOfCandidates(
  db: Kysely<DB>,
  campaignId: number,
  names: readonly string[],
  reading: number | null = null,
): Promise<ManifestRow[]> {
  if (names.length === 0) return []
  return manifestRows(db, campaignId, reading).where('manifest_row.candidate', 'in', names).execute()
}

function manifestRows(db: Kysely<DB>, campaignId: number, reading: number | null) {
  return db
    .selectFrom('manifest_row')
    .innerJoin('file', 'file.id', 'manifest_row.file_id')
    .selectAll('manifest_row')
    .where('manifest_row.campaign_id', '=', campaignId)
    .where(inForce(reading))
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
