import type { Kysely } from 'kysely'
import type { DB } from '../schema'

export interface StampOfCandidate {
  candidateId: number
  recipeId: number
  view: string
  sha256: string
  width: number
  height: number
  note: string | null
}

/** Every stamp of these candidates, those of the newest recipe first. */
export async function listStamps(
  db: Kysely<DB>,
  campaignId: number,
  candidateIds: readonly number[],
): Promise<StampOfCandidate[]> {
  if (candidateIds.length === 0) return []
  return db
    .selectFrom('stamp')
    .select(['candidate_id as candidateId', 'recipe_id as recipeId', 'view', 'sha256', 'width', 'height', 'note'])
    .where('campaign_id', '=', campaignId)
    .where('candidate_id', 'in', candidateIds)
    .orderBy('recipe_id', 'desc')
    .orderBy('id')
    .execute()
}

export interface PlaneGeometry {
  candidateId: number
  band: string
  width: number
  height: number
  wcs: string | null
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
    .select([
      'plane.candidate_id as candidateId',
      'plane.band',
      'plane.width',
      'plane.height',
      'plane.wcs',
      'plane.pixel_scale_arcsec as pixelScaleArcsec',
      'candidate.pixel_scale_arcsec as candidateScaleArcsec',
    ])
    .where('candidate.campaign_id', '=', campaignId)
    .where('plane.candidate_id', 'in', candidateIds)
    .execute()
}
