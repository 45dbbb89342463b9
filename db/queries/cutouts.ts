import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'

export interface PlaneOfFile {
  fileId: number
  band: string
  candidateId: number
  candidate: string
}

export async function listPlanesOfFiles(db: Kysely<DB>, fileIds: readonly number[]): Promise<PlaneOfFile[]> {
  if (fileIds.length === 0) return []
  return db
    .selectFrom('plane')
    .innerJoin('candidate', 'candidate.id', 'plane.candidate_id')
    .select(['plane.file_id as fileId', 'plane.band', 'candidate.id as candidateId', 'candidate.name as candidate'])
    .where('plane.file_id', 'in', fileIds)
    .execute()
}

export interface HeldPlaneRow {
  candidate: string
  band: string
  hdu: number
  planeIndex: number
  fileId: number
  fileName: string
  sha256: string
}

/** The planes that candidates of these names have. */
export async function listHeldPlanes(
  db: Kysely<DB>,
  campaignId: number,
  candidates: readonly string[],
): Promise<HeldPlaneRow[]> {
  if (candidates.length === 0) return []
  return db
    .selectFrom('candidate')
    .innerJoin('plane', 'plane.candidate_id', 'candidate.id')
    .innerJoin('file', 'file.id', 'plane.file_id')
    .select([
      'candidate.name as candidate',
      'plane.band',
      'plane.hdu',
      'plane.plane_index as planeIndex',
      'plane.file_id as fileId',
      'file.name as fileName',
      'file.sha256',
    ])
    .where('candidate.campaign_id', '=', campaignId)
    .where('candidate.name', 'in', candidates)
    .execute()
}

export interface PlaneSourceRow extends Omit<HeldPlaneRow, 'candidate'> {
  width: number
  height: number
}

/** What the planes of a candidate are read from; nothing for a candidate of another campaign. */
export async function listPlaneSources(
  db: Kysely<DB>,
  campaignId: number,
  candidateId: number,
): Promise<PlaneSourceRow[]> {
  return db
    .selectFrom('candidate')
    .innerJoin('plane', 'plane.candidate_id', 'candidate.id')
    .innerJoin('file', 'file.id', 'plane.file_id')
    .select([
      'plane.band',
      'plane.hdu',
      'plane.plane_index as planeIndex',
      'plane.width',
      'plane.height',
      'plane.file_id as fileId',
      'file.name as fileName',
      'file.sha256',
    ])
    .where('candidate.campaign_id', '=', campaignId)
    .where('candidate.id', '=', candidateId)
    .execute()
}

export interface FileOfCandidate {
  id: number
  name: string
  candidateId: number
  candidate: string
  gradesGiven: number
}

/** Files with the candidate that has their planes, by key of the file; none that was made here for a calibration stamp. */
export async function listFilesOfCandidates(
  db: Kysely<DB>,
  campaignId: number,
  afterId: number,
  limit: number,
): Promise<FileOfCandidate[]> {
  return db
    .selectFrom('file')
    .innerJoin('plane', 'plane.file_id', 'file.id')
    .innerJoin('candidate', 'candidate.id', 'plane.candidate_id')
    .select([
      'file.id',
      'file.name',
      'candidate.id as candidateId',
      'candidate.name as candidate',
      'candidate.grades_given as gradesGiven',
    ])
    .where('file.campaign_id', '=', campaignId)
    .where('file.id', '>', afterId)
    .where('candidate.painted_over', 'is', null)
    .groupBy('file.id')
    .orderBy('file.id')
    .limit(limit)
    .execute()
}

export async function deletePlanesOfFiles(db: Kysely<DB>, fileIds: readonly number[]): Promise<void> {
  if (fileIds.length > 0) await db.deleteFrom('plane').where('file_id', 'in', fileIds).execute()
}

export interface CandidateFacts {
  name: string
  raDeg: number | null
  decDeg: number | null
  pixelScaleArcsec: number | null
  score: number | null
  lensRedshift: number | null
  sourceRedshift: number | null
  /** null leaves what is there. */
  imagedAt: string | null
}

/** Of the numbers of new candidates, the share that is left free for calibration stamps made later. */
const LEFT_FREE = 0.125

/**
 * Adds candidates, or gives those of the same name these facts. A fact that is null leaves what is there, or with 'withdraw'
 * takes it away. Ids by name.
 */
export async function upsertCandidates(
  db: Kysely<DB>,
  campaignId: number,
  candidates: readonly CandidateFacts[],
  now: string,
  nothing: 'keep' | 'withdraw' = 'keep',
): Promise<Map<string, number>> {
  if (candidates.length === 0) return new Map()
  const kept = (column: string) => sql<never>`coalesce(excluded.${sql.ref(column)}, candidate.${sql.ref(column)})`
  const fact = (column: string) => (nothing === 'keep' ? kept(column) : sql<never>`excluded.${sql.ref(column)}`)
  let id =
    (
      await db
        .selectFrom('candidate')
        .select((e) => e.fn.max('id').as('id'))
        .executeTakeFirst()
    )?.id ?? 0
  const rows = await db
    .insertInto('candidate')
    .values(
      candidates.map((candidate) => ({
        id: (id += Math.random() < LEFT_FREE ? 2 : 1),
        campaign_id: campaignId,
        name: candidate.name,
        ra_deg: candidate.raDeg,
        dec_deg: candidate.decDeg,
        pixel_scale_arcsec: candidate.pixelScaleArcsec,
        score: candidate.score,
        lens_redshift: candidate.lensRedshift,
        source_redshift: candidate.sourceRedshift,
        truth: null,
        imaged_at: candidate.imagedAt,
        state_cause: null,
        state_cause_id: null,
        state_since: now,
        verdict_id: null,
        ruling_id: null,
        created_at: now,
      })),
    )
    .onConflict((conflict) =>
      conflict.columns(['campaign_id', 'name']).doUpdateSet({
        ra_deg: fact('ra_deg'),
        dec_deg: fact('dec_deg'),
        pixel_scale_arcsec: fact('pixel_scale_arcsec'),
        score: fact('score'),
        lens_redshift: fact('lens_redshift'),
        source_redshift: fact('source_redshift'),
        imaged_at: kept('imaged_at'),
      }),
    )
    .returning(['id', 'name'])
    .execute()
  return new Map(rows.map(({ id, name }) => [name, id]))
}

/** Of these names, the candidates that there are. */
export async function listCandidateNames(
  db: Kysely<DB>,
  campaignId: number,
  names: readonly string[],
): Promise<string[]> {
  if (names.length === 0) return []
  const rows = await db
    .selectFrom('candidate')
    .select('name')
    .where('campaign_id', '=', campaignId)
    .where('name', 'in', names)
    .execute()
  return rows.map(({ name }) => name)
}

export interface NewPlane {
  candidateId: number
  band: string
  fileId: number
  hdu: number
  planeIndex: number
  width: number
  height: number
  wcs: string | null
  pixelScaleArcsec: number | null
  background: number
  noise: number
}

/** Adds planes; a plane of the same candidate and band gives way. */
export async function upsertPlanes(db: Kysely<DB>, planes: readonly NewPlane[]): Promise<void> {
  if (planes.length === 0) return
  await db
    .insertInto('plane')
    .values(
      planes.map((plane) => ({
        candidate_id: plane.candidateId,
        band: plane.band,
        file_id: plane.fileId,
        hdu: plane.hdu,
        plane_index: plane.planeIndex,
        width: plane.width,
        height: plane.height,
        wcs: plane.wcs,
        pixel_scale_arcsec: plane.pixelScaleArcsec,
        background: plane.background,
        noise: plane.noise,
      })),
    )
    .onConflict((conflict) =>
      conflict.columns(['candidate_id', 'band']).doUpdateSet((e) => ({
        file_id: e.ref('excluded.file_id'),
        hdu: e.ref('excluded.hdu'),
        plane_index: e.ref('excluded.plane_index'),
        width: e.ref('excluded.width'),
        height: e.ref('excluded.height'),
        wcs: e.ref('excluded.wcs'),
        pixel_scale_arcsec: e.ref('excluded.pixel_scale_arcsec'),
        background: e.ref('excluded.background'),
        noise: e.ref('excluded.noise'),
      })),
    )
    .execute()
}

/** Takes away the planes of files that these have replaced and returns the candidates that had them. */
export async function deletePlanesOfReplaced(db: Kysely<DB>, fileIds: readonly number[]): Promise<number[]> {
  if (fileIds.length === 0) return []
  const old = await db.selectFrom('file').select('id').where('replaced_by', 'in', fileIds).execute()
  if (old.length === 0) return []
  const rows = await db
    .deleteFrom('plane')
    .where(
      'file_id',
      'in',
      old.map(({ id }) => id),
    )
    .returning('candidate_id')
    .execute()
  return [...new Set(rows.map((row) => row.candidate_id))]
}
