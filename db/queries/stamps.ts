import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'
import type { Campaign } from '../schema/campaigns'
import { among, inCampaign } from './by-ids'

export interface StampOfCandidate {
  candidateId: number
  recipeId: number
  view: string
  sha256: string
  width: number
  height: number
  note: string | null
}

/** The stamps of these candidates, of each those of the newest recipe that made any. */
export async function listStamps(
  db: Kysely<DB>,
  campaignId: number,
  candidateIds: readonly number[],
): Promise<StampOfCandidate[]> {
  if (candidateIds.length === 0) return []
  return db
    .selectFrom('stamp')
    .select(['candidate_id as candidateId', 'recipe_id as recipeId', 'view', 'sha256', 'width', 'height', 'note'])
    .where(inCampaign('campaign_id', campaignId))
    .where('candidate_id', 'in', among(candidateIds))
    .where('recipe_id', '=', (e) =>
      e
        .selectFrom('stamp as newer')
        .select((n) => n.fn.max('newer.recipe_id').as('id'))
        .whereRef('newer.candidate_id', '=', 'stamp.candidate_id'),
    )
    .orderBy('id')
    .execute()
}

export interface PlaneGeometry {
  candidateId: number
  band: string
  width: number
  height: number
  wcs: string | null
  hdu: number
  planeIndex: number
  /** Of the file. */
  sha256: string
  /** Of the plane's own header. */
  pixelScaleArcsec: number | null
  /** Of the candidate, which a manifest may have given. */
  candidateScaleArcsec: number | null
}

export async function listPlaneGeometries(
  db: Kysely<DB>,
  campaignId: number,
  candidateIds: readonly number[],
): Promise<PlaneGeometry[]> {
  if (candidateIds.length === 0) return []
  return db
    .selectFrom('plane')
    .innerJoin('candidate', 'candidate.id', 'plane.candidate_id')
    .innerJoin('file', 'file.id', 'plane.file_id')
    .select([
      'plane.candidate_id as candidateId',
      'plane.band',
      'plane.width',
      'plane.height',
      'plane.wcs',
      'plane.hdu',
      'plane.plane_index as planeIndex',
      'file.sha256',
      'plane.pixel_scale_arcsec as pixelScaleArcsec',
      'candidate.pixel_scale_arcsec as candidateScaleArcsec',
    ])
    .where('candidate.campaign_id', '=', campaignId)
    .where('plane.candidate_id', 'in', candidateIds)
    .execute()
}

export interface NewStamp {
  candidateId: number
  view: string
  sha256: string
  bytes: number
  width: number
  height: number
  note: string | null
}

/** Puts the stamps of one recipe in place of those that these candidates have of it. */
export async function replaceStamps(
  db: Kysely<DB>,
  campaignId: number,
  recipeId: number,
  candidateIds: readonly number[],
  stamps: readonly NewStamp[],
): Promise<void> {
  if (candidateIds.length === 0) return
  await db.deleteFrom('stamp').where('candidate_id', 'in', candidateIds).where('recipe_id', '=', recipeId).execute()
  if (stamps.length === 0) return
  await db
    .insertInto('stamp')
    .values(
      stamps.map((stamp) => ({
        campaign_id: campaignId,
        candidate_id: stamp.candidateId,
        recipe_id: recipeId,
        view: stamp.view,
        sha256: stamp.sha256,
        bytes: stamp.bytes,
        width: stamp.width,
        height: stamp.height,
        note: stamp.note,
      })),
    )
    .execute()
}

/** Whose stamp of this campaign it is and by which recipe, the newest where several made it; null where there is none. */
export async function findOriginOfStamp(
  db: Kysely<DB>,
  campaignId: number,
  sha256: string,
): Promise<{ candidateId: number; recipeId: number } | null> {
  const row = await db
    .selectFrom('stamp')
    .select(['candidate_id as candidateId', 'recipe_id as recipeId'])
    .where('campaign_id', '=', campaignId)
    .where('sha256', '=', sha256)
    .orderBy('recipe_id', 'desc')
    .limit(1)
    .executeTakeFirst()
  return row ?? null
}

/** Names of candidates that have planes but no stamps of this recipe, by key. */
export async function listCandidatesToImage(
  db: Kysely<DB>,
  campaignId: number,
  recipeId: number,
  afterId: number,
  limit: number,
): Promise<{ id: number; name: string }[]> {
  return db
    .selectFrom('candidate')
    .select(['candidate.id', 'candidate.name'])
    .where('candidate.campaign_id', '=', campaignId)
    .where('candidate.id', '>', afterId)
    .where((e) =>
      e.exists(e.selectFrom('plane').select('plane.id').whereRef('plane.candidate_id', '=', 'candidate.id')),
    )
    .where((e) =>
      e.or([
        e('candidate.imaged_at', 'is', null),
        e.not(
          e.exists(
            e
              .selectFrom('stamp')
              .select('stamp.id')
              .whereRef('stamp.candidate_id', '=', 'candidate.id')
              .where('stamp.recipe_id', '=', recipeId),
          ),
        ),
      ]),
    )
    .orderBy('candidate.id')
    .limit(limit)
    .execute()
}

export async function listCandidatesById(
  db: Kysely<DB>,
  campaignId: number,
  ids: readonly number[],
): Promise<{ id: number; name: string }[]> {
  if (ids.length === 0) return []
  return db
    .selectFrom('candidate')
    .select(['id', 'name'])
    .where('campaign_id', '=', campaignId)
    .where('id', 'in', ids)
    .execute()
}

/** Takes candidates out of the queue until they are imaged again: their cutouts changed, their stamps did not yet. */
export async function clearImaged(db: Kysely<DB>, candidateIds: readonly number[]): Promise<void> {
  if (candidateIds.length === 0) return
  await db.updateTable('candidate').set({ imaged_at: null }).where('id', 'in', candidateIds).execute()
}

/** Takes away stamps of later recipes than this: they were made of planes that these candidates no longer have. */
export async function deleteLaterStamps(
  db: Kysely<DB>,
  candidateIds: readonly number[],
  recipeId: number,
): Promise<boolean> {
  if (candidateIds.length === 0) return false
  const gone = await db
    .deleteFrom('stamp')
    .where('candidate_id', 'in', candidateIds)
    .where('recipe_id', '>', recipeId)
    .executeTakeFirst()
  return gone.numDeletedRows > 0
}

/**
 * Files whose planes these candidates have and that are read but not imaged. What was noted of a file stays; the part of it
 * from `notImaged` on, which says why it was not imaged, goes.
 */
export async function setFilesImaged(
  db: Kysely<DB>,
  candidateIds: readonly number[],
  notImaged: string,
  now: string,
): Promise<void> {
  if (candidateIds.length === 0) return
  await db
    .updateTable('file')
    .set({
      fate: 'imaged',
      reason: sql<string | null>`case when instr(reason, ${notImaged}) = 0 then reason
        else nullif(trim(substr(reason, 1, instr(reason, ${notImaged}) - 1)), '') end`,
      updated_at: now,
    })
    .where('fate', '=', 'read')
    .where('kind', '=', 'fits')
    .where('id', 'in', (query) =>
      query.selectFrom('plane').select('plane.file_id').where('plane.candidate_id', 'in', candidateIds),
    )
    .execute()
}

export async function findCampaignById(db: Kysely<DB>, id: number): Promise<Campaign | null> {
  return (await db.selectFrom('campaign').selectAll().where('id', '=', id).executeTakeFirst()) ?? null
}
