import { sql, type Kysely, type SqlBool } from 'kysely'
import type { DB } from '../schema'
import type { Decision, ListState } from '../schema/matching'
import { fromJson } from '../schema/values'
import { among } from './by-ids'

/** Wider than the rounding of degrees, far below any radius in use. */
const SLACK_DEG = sql.raw('1e-9')

/**
 * Half-width in right ascension of the box round a cone of `c.radius` arcsec, degrees: asin(sin r / cos d), and all round where it
 * touches a pole (spherical sine rule). As a materialised column, so that it is computed once a centre.
 */
const halfWidthDeg = (dec: string, radius: string) =>
  sql.raw(`case when abs(${dec}) + ${radius} / 3600.0 + 1e-9 >= 90 then 180.0
    else degrees(asin(sin(radians(${radius} / 3600.0)) / cos(radians(${dec})))) + 1e-9 end`)

/** Great-circle distance in arcsec by haversines, right from nothing to the half sky (R. W. Sinnott, Sky & Telescope 68, 158, 1984). */
const separationArcsec = sql.raw(`3600 * degrees(2 * asin(min(1, sqrt(
  pow(sin(radians(o.dec_deg - c.dec_deg) / 2), 2)
  + cos(radians(o.dec_deg)) * cos(radians(c.dec_deg)) * pow(sin(radians(o.ra_deg - c.ra_deg) / 2), 2)))))`)

/** In the box of the cone, across RA 0/360 too. */
const inBox = sql<SqlBool>`o.dec_deg between c.dec_deg - c.radius / 3600.0 - ${SLACK_DEG} and c.dec_deg + c.radius / 3600.0 + ${SLACK_DEG}
  and min(abs(o.ra_deg - c.ra_deg), 360 - abs(o.ra_deg - c.ra_deg)) <= c.width`

/**
 * Finds what lies in the cones of these candidates in the lists in force (or in one of them) and keeps it. What was kept of them
 * must be gone. Calibration candidates and those without a position find nothing.
 */
export async function insertObjectMatches(
  db: Kysely<DB>,
  candidateIds: readonly number[],
  listId: number | null = null,
): Promise<void> {
  const ofList = listId === null ? sql`true` : sql`l.id = ${listId}`
  await sql`
    insert into object_match (candidate_id, list_id, row_number, separation_arcsec)
    with c as materialized (
      select candidate.id, candidate.ra_deg, candidate.dec_deg, l.id as list_id, l.radius_arcsec as radius,
        ${halfWidthDeg('candidate.dec_deg', 'l.radius_arcsec')} as width
      from candidate join reference_list l on l.campaign_id = candidate.campaign_id
      where candidate.id in ${among(candidateIds)} and candidate.truth is null
        and candidate.ra_deg is not null and candidate.dec_deg is not null and l.state = 'ready' and ${ofList}
    )
    select id, list_id, row_number, separation from (
      select c.id, o.list_id, o.row_number, c.radius, ${separationArcsec} as separation
      from c cross join reference_object o where o.list_id = c.list_id and ${inBox}
    ) where separation <= radius`.execute(db)
}

/** The same against the candidates of the own campaign and of every other, each within the larger of the two campaigns' radii. */
export async function insertCandidateMatches(db: Kysely<DB>, candidateIds: readonly number[]): Promise<void> {
  await sql`
    insert into candidate_match (first_id, second_id, first_campaign_id, second_campaign_id, separation_arcsec)
    with c as materialized (
      select candidate.id, candidate.campaign_id, candidate.ra_deg, candidate.dec_deg, other.id as other_campaign_id,
        max(own.match_radius_arcsec, other.match_radius_arcsec) as radius,
        ${halfWidthDeg('candidate.dec_deg', 'max(own.match_radius_arcsec, other.match_radius_arcsec)')} as width
      from candidate join campaign own on own.id = candidate.campaign_id cross join campaign other
      where candidate.id in ${among(candidateIds)} and candidate.truth is null
        and candidate.ra_deg is not null and candidate.dec_deg is not null
    )
    select min(a, b), max(a, b), case when a < b then a_campaign else b_campaign end,
      case when a < b then b_campaign else a_campaign end, separation
    from (
      select c.id as a, o.id as b, c.campaign_id as a_campaign, o.campaign_id as b_campaign, c.radius,
        ${separationArcsec} as separation
      from c cross join candidate o indexed by candidate_dec
      where o.campaign_id = c.other_campaign_id and ${inBox} and o.truth is null and o.id <> c.id
    ) where separation <= radius
    on conflict do nothing`.execute(db)
}

export async function deleteMatchesOf(db: Kysely<DB>, candidateIds: readonly number[]): Promise<void> {
  const ids = among(candidateIds)
  await sql`delete from object_match where candidate_id in ${ids}`.execute(db)
  await sql`delete from candidate_match where first_id in ${ids}`.execute(db)
  await sql`delete from candidate_match where second_id in ${ids}`.execute(db)
}

export async function deleteMatchesWithList(
  db: Kysely<DB>,
  candidateIds: readonly number[],
  listId: number,
): Promise<void> {
  await sql`delete from object_match where candidate_id in ${among(candidateIds)} and list_id = ${listId}`.execute(db)
}

/** Candidates that wait to be matched, in the order of their ids. */
export async function listDue(db: Kysely<DB>, campaignId: number, limit: number): Promise<number[]> {
  const rows = await db
    .selectFrom('match_due')
    .select('candidate_id as id')
    .where('campaign_id', '=', campaignId)
    .orderBy('candidate_id')
    .limit(limit)
    .execute()
  return rows.map(({ id }) => id)
}

export async function countDue(db: Kysely<DB>, campaignId: number): Promise<number> {
  const row = await db
    .selectFrom('match_due')
    .select((e) => e.fn.countAll<number>().as('count'))
    .where('campaign_id', '=', campaignId)
    .executeTakeFirstOrThrow()
  return row.count
}

/** Lists that are being read, or that no job has matched to its end since they were last to be. */
export async function listUnmatchedLists(
  db: Kysely<DB>,
  campaignId: number,
): Promise<{ name: string; state: ListState; hasFailed: boolean }[]> {
  const { rows } = await sql<{ name: string; state: ListState; hasFailed: 0 | 1 }>`
    select l.name, l.state, max(case l.state when 'ready' then job.state = 'failed' else not exists (
        select 1 from job reading where reading.campaign_id = l.campaign_id and reading.kind = 'read-list'
          and reading.state in ('queued', 'running') and json_extract(reading.payload, '$.listId') = l.id) end) as hasFailed
      from reference_list l left join job on job.campaign_id = l.campaign_id and job.state <> 'done'
        and job.kind = 'match-list' and json_extract(job.payload, '$.listId') = l.id
        and not exists (select 1 from job later where later.campaign_id = l.campaign_id and later.kind = 'match-list'
          and later.state = 'done' and later.id > job.id and later.payload = job.payload)
      where l.campaign_id = ${campaignId} and (l.state = 'reading' or l.state = 'ready' and job.id is not null)
      group by l.id order by l.id`.execute(db)
  return rows.map((row) => ({ ...row, hasFailed: row.hasFailed === 1 }))
}

export async function deleteDue(db: Kysely<DB>, campaignId: number, candidateIds: readonly number[]): Promise<void> {
  await sql`delete from match_due where campaign_id = ${campaignId} and candidate_id in ${among(candidateIds)}`.execute(
    db,
  )
}

/** Every candidate of the campaign that has a position waits to be matched anew. */
export async function insertAllDue(db: Kysely<DB>, campaignId: number): Promise<void> {
  await sql`insert or ignore into match_due select campaign_id, id from candidate
    where campaign_id = ${campaignId} and truth is null and ra_deg is not null and dec_deg is not null`.execute(db)
}

/** Candidates with a position, by id from after `afterId`. */
export async function listPlacedAfter(
  db: Kysely<DB>,
  campaignId: number,
  afterId: number,
  limit: number,
): Promise<number[]> {
  const rows = await db
    .selectFrom('candidate')
    .select('id')
    .where('campaign_id', '=', campaignId)
    .where('id', '>', afterId)
    .where('truth', 'is', null)
    .where('ra_deg', 'is not', null)
    .orderBy('id')
    .limit(limit)
    .execute()
  return rows.map(({ id }) => id)
}

/** A match of a candidate with a row of a list stands until a lead says that they differ; `m` is the match. */
export const standingMatch = sql<SqlBool>`ifnull((select d.decision from match_decision d
  where d.candidate_id = m.candidate_id and d.list_id = m.list_id and d.row_number = m.row_number
  order by d.id desc limit 1), '') <> 'different'`

const matchedIn = (campaignId: number, which: ReturnType<typeof sql>) =>
  sql<SqlBool>`candidate.id in (select m.candidate_id from reference_list l cross join object_match m
    where l.campaign_id = ${campaignId} and l.state = 'ready' and ${which} and m.list_id = l.id and ${standingMatch})`

/**
 * Whether `candidate` is known from a list in force, as a condition for lists of candidates. For leads and viewers: to a grader it
 * would tell of candidates that they have not judged.
 */
export const knownIn = (campaignId: number) => matchedIn(campaignId, sql`true`)

/** Whether a list in force keeps `candidate` out of what is new: the rule of its lead. For leads and viewers as well. */
export const keptOutOfNew = (campaignId: number) => matchedIn(campaignId, sql`l.keeps_out_of_new = 1`)

export interface ObjectMatchRow {
  candidateId: number
  listId: number
  list: string
  source: string
  listDate: string
  keepsOutOfNew: boolean
  rowNumber: number
  name: string
  separationArcsec: number
  raDeg: number | null
  decDeg: number | null
  redshift: number | null
  more: Record<string, string>
  /** The newest decision on this match; null: none yet. */
  decision: Decision | null
}

/** Matches of these candidates with lists in force, nearest first, those told to differ among them. */
export async function listObjectMatches(db: Kysely<DB>, candidateIds: readonly number[]): Promise<ObjectMatchRow[]> {
  const rows = await db
    .selectFrom('object_match as m')
    .innerJoin('reference_list as l', 'l.id', 'm.list_id')
    .innerJoin('reference_object as o', (join) =>
      join.onRef('o.list_id', '=', 'm.list_id').onRef('o.row_number', '=', 'm.row_number'),
    )
    .select([
      'm.candidate_id as candidateId',
      'm.list_id as listId',
      'l.name as list',
      'l.source',
      'l.list_date as listDate',
      'l.keeps_out_of_new as keepsOutOfNew',
      'm.row_number as rowNumber',
      'o.name',
      'm.separation_arcsec as separationArcsec',
      'o.ra_deg as raDeg',
      'o.dec_deg as decDeg',
      'o.redshift',
      'o.more',
    ])
    .select(
      sql<Decision | null>`(select d.decision from match_decision d
        where d.candidate_id = m.candidate_id and d.list_id = m.list_id and d.row_number = m.row_number
        order by d.id desc limit 1)`.as('decision'),
    )
    .where('m.candidate_id', 'in', among(candidateIds))
    .where('l.state', '=', 'ready')
    .orderBy('m.candidate_id')
    .orderBy('m.separation_arcsec')
    .orderBy('m.list_id')
    .orderBy('m.row_number')
    .execute()
  return rows.map((row) => ({
    ...row,
    keepsOutOfNew: row.keepsOutOfNew === 1,
    more: row.more === null ? {} : fromJson(row.more),
  }))
}
