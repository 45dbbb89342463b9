import { sql, type Kysely, type RawBuilder, type SqlBool } from 'kysely'
import type { DB } from '../schema'

/** Calibration stamps that were made here and have one of these names. */
export async function listPaintedOfNames(
  db: Kysely<DB>,
  campaignId: number,
  names: readonly string[],
): Promise<{ id: number; name: string; raDeg: number | null; decDeg: number | null }[]> {
  if (names.length === 0) return []
  return db
    .selectFrom('candidate')
    .select(['id', 'name', 'ra_deg as raDeg', 'dec_deg as decDeg'])
    .where('campaign_id', '=', campaignId)
    .where('name', 'in', sql<string>`(select value from json_each(${JSON.stringify(names)}))`)
    .where('painted_over', 'is not', null)
    .execute()
}

export async function setCandidateName(db: Kysely<DB>, id: number, name: string): Promise<void> {
  await db.updateTable('candidate').set({ name }).where('id', '=', id).execute()
}

/** Whether a file, whose id stands in `column`, was made here for a calibration stamp. */
export const isPaintedFile = (column: string): RawBuilder<SqlBool> =>
  sql<SqlBool>`exists (select 1 from plane join candidate painted on painted.id = plane.candidate_id
    where plane.file_id = ${sql.ref(column)} and painted.painted_over is not null)`

/** Files that were made here leave this name to one that is delivered. */
export async function clearPaintedFileName(db: Kysely<DB>, campaignId: number, name: string): Promise<void> {
  await db
    .updateTable('file')
    .set({ name: sql<string>`'calibration-' || file.id || '_' || file.name` })
    .where('campaign_id', '=', campaignId)
    .where('name', '=', name)
    .where(isPaintedFile('file.id'))
    .execute()
}
