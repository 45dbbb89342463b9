import { sql, type Kysely, type SqlBool } from 'kysely'
import type { DB } from '../schema'
import type { Campaign } from '../schema/campaigns'
import type { Candidate } from '../schema/intake'
import { among, inCampaign } from './by-ids'

/** For jobs, which carry a campaign's id. */
export async function requireCampaign(db: Kysely<DB>, id: number): Promise<Campaign> {
  return db.selectFrom('campaign').selectAll().where('id', '=', id).executeTakeFirstOrThrow()
}

/** A candidate of this campaign, calibration candidates included; null where it is in another or in none. */
export async function findCandidate(db: Kysely<DB>, campaignId: number, id: number): Promise<Candidate | null> {
  const candidate = await db
    .selectFrom('candidate')
    .selectAll()
    .where('id', '=', id)
    .where('campaign_id', '=', campaignId)
    .executeTakeFirst()
  return candidate ?? null
}

export async function listCandidateNames(
  db: Kysely<DB>,
  campaignId: number,
  ids: readonly number[],
): Promise<Map<number, string>> {
  const rows = await db
    .selectFrom('candidate')
    .select(['id', 'name'])
    .where(inCampaign('campaign_id', campaignId))
    .where('id', 'in', among(ids))
    .execute()
  return new Map(rows.map(({ id, name }) => [id, name]))
}

/** The files whose planes the candidate has, each with its bands, by name. */
export async function listFilesOf(db: Kysely<DB>, candidateId: number): Promise<{ name: string; bands: string[] }[]> {
  const rows = await db
    .selectFrom('plane')
    .innerJoin('file', 'file.id', 'plane.file_id')
    .select(['file.id', 'file.name', 'plane.band'])
    .where('plane.candidate_id', '=', candidateId)
    .orderBy('file.name')
    .orderBy('plane.plane_index')
    .orderBy('plane.id')
    .execute()
  const files = new Map<number, { name: string; bands: string[] }>()
  for (const { id, name, band } of rows) {
    const file = files.get(id) ?? { name, bands: [] }
    file.bands.push(band)
    files.set(id, file)
  }
  return [...files.values()]
}

export async function findDesignation(db: Kysely<DB>, candidateId: number): Promise<string | null> {
  const row = await db
    .selectFrom('designation')
    .select('designation')
    .where('candidate_id', '=', candidateId)
    .executeTakeFirst()
  return row?.designation ?? null
}

export interface NamedCandidate {
  id: number
  name: string
}

/** The candidates before and after this one by name, as the table of candidates sorts them, or by number. */
export async function findNeighbours(
  db: Kysely<DB>,
  { campaignId, withCalibration }: { campaignId: number; withCalibration: boolean },
  id: number,
  order: 'name' | 'number',
): Promise<{ previous: NamedCandidate | null; next: NamedCandidate | null }> {
  const candidates = db
    .selectFrom('candidate')
    .select(['id', 'name'])
    .where('campaign_id', '=', campaignId)
    .$if(!withCalibration, (query) => query.where('truth', 'is', null))
    .limit(1)
  if (order === 'number') {
    const previous = await candidates.where('id', '<', id).orderBy('id', 'desc').executeTakeFirst()
    const next = await candidates.where('id', '>', id).orderBy('id').executeTakeFirst()
    return { previous: previous ?? null, next: next ?? null }
  }
  const here = sql`(select name, id from candidate where id = ${id})`
  const before = sql<SqlBool>`(name, id) < ${here}`
  const after = sql<SqlBool>`(name, id) > ${here}`
  const previous = await candidates.where(before).orderBy('name', 'desc').orderBy('id', 'desc').executeTakeFirst()
  const next = await candidates.where(after).orderBy('name').orderBy('id').executeTakeFirst()
  return { previous: previous ?? null, next: next ?? null }
}
