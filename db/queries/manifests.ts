import { sql, type Kysely, type SqlBool } from 'kysely'
import type { DB } from '../schema'
import type { ManifestRow } from '../schema/intake'
import { inForce } from './in-force'

const NO_FILE = -1

/**
 * A manifest stays in force until a newer one of its name is read: not while that one waits, nor when it is refused. Of several
 * that were replaced, the one that was in use last. `reading` is the manifest that is taken now: it counts as read.
 */
const manifestInForce = (reading: number | null) =>
  sql<SqlBool>`(${inForce(['stored', 'refused', 'duplicate'], ['read'])} and file.replaced_by is not ${reading ?? NO_FILE}
    and (file.replaced_by is null or file.fate = 'read'))`

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
    .where(manifestInForce(reading))
}

export interface ToldPlane {
  candidate: string
  raDeg: number | null
  decDeg: number | null
  designation: string | null
  band: string
  fileName: string
  width: number
  height: number
  wcs: string | null
  pixelScaleArcsec: number | null
}

/** The planes of candidates, with where these are and what they are called. */
export async function listToldPlanes(
  db: Kysely<DB>,
  campaignId: number,
  names: readonly string[],
): Promise<ToldPlane[]> {
  if (names.length === 0) return []
  return db
    .selectFrom('candidate')
    .innerJoin('plane', 'plane.candidate_id', 'candidate.id')
    .innerJoin('file', 'file.id', 'plane.file_id')
    .leftJoin('designation', 'designation.candidate_id', 'candidate.id')
    .select([
      'candidate.name as candidate',
      'candidate.ra_deg as raDeg',
      'candidate.dec_deg as decDeg',
      'designation.designation',
      'plane.band',
      'file.name as fileName',
      'plane.width',
      'plane.height',
      'plane.wcs',
      'plane.pixel_scale_arcsec as pixelScaleArcsec',
    ])
    .where('candidate.campaign_id', '=', campaignId)
    .where('candidate.name', 'in', names)
    .execute()
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
