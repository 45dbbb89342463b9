import { sql, type Kysely, type SqlBool } from 'kysely'
import type { DB } from '../schema'
import type { CandidateState } from '../schema/intake'
import type { Decision, Merge } from '../schema/matching'
import type { IsoTime } from '../schema/values'
import { among, inCampaign } from './by-ids'

/** Of these candidates of the campaign, those that are confirmed or set aside, calibration left out. */
export async function listDecidedAmong(
  db: Kysely<DB>,
  campaignId: number,
  candidateIds: readonly number[],
): Promise<number[]> {
  const rows = await db
    .selectFrom('candidate')
    .select('id')
    .where(inCampaign('campaign_id', campaignId))
    .where('id', 'in', among(candidateIds))
    .where('state', 'in', ['confirmed', 'set aside'])
    .where('truth', 'is', null)
    .execute()
  return rows.map(({ id }) => id)
}

export interface StandingMerge {
  id: number
  keptId: number
  keptName: string
  mergedId: number
  mergedName: string
  reason: string
  by: string
  pseudonym: string | null
  rulingId: number
  rulingBeforeId: number | null
  at: IsoTime
}

/** Merges and partings, with the names of whom they concern. */
function mergeEvents(db: Kysely<DB>) {
  return db
    .selectFrom('merge')
    .innerJoin('candidate as kept', 'kept.id', 'merge.kept_id')
    .innerJoin('candidate as merged', 'merged.id', 'merge.merged_id')
    .innerJoin('person', 'person.id', 'merge.person_id')
    .leftJoin('membership', (join) =>
      join
        .onRef('membership.person_id', '=', 'merge.person_id')
        .onRef('membership.campaign_id', '=', 'merge.campaign_id'),
    )
    .select([
      'merge.id',
      'merge.event',
      'merge.kept_id as keptId',
      'kept.name as keptName',
      'merge.merged_id as mergedId',
      'merged.name as mergedName',
      'merge.reason',
      'person.name as by',
      'membership.pseudonym',
      'merge.ruling_id as rulingId',
      'merge.ruling_before_id as rulingBeforeId',
      'merge.created_at as at',
    ])
}

/** Merges that hold: of each merged candidate the newest event, where it is no parting. */
function standingMerges(db: Kysely<DB>) {
  return mergeEvents(db)
    .where('merge.event', '=', 'merged')
    .where((e) =>
      e.not(
        e.exists(
          e
            .selectFrom('merge as later')
            .select('later.id')
            .whereRef('later.merged_id', '=', 'merge.merged_id')
            .whereRef('later.id', '>', 'merge.id'),
        ),
      ),
    )
}

/** What this candidate is merged into now; null: nothing. */
export async function findStandingMerge(db: Kysely<DB>, mergedId: number): Promise<StandingMerge | null> {
  return (await standingMerges(db).where('merge.merged_id', '=', mergedId).executeTakeFirst()) ?? null
}

/** What is merged into this candidate now, oldest first. */
export async function listMergedInto(db: Kysely<DB>, keptId: number): Promise<StandingMerge[]> {
  return standingMerges(db).where('merge.kept_id', '=', keptId).orderBy('merge.id').execute()
}

/** All merges of a campaign that hold, newest first. */
export async function listStandingMerges(db: Kysely<DB>, campaignId: number, limit: number): Promise<StandingMerge[]> {
  return standingMerges(db)
    .where('merge.campaign_id', '=', campaignId)
    .orderBy('merge.id', 'desc')
    .limit(limit)
    .execute()
}

export interface MergeEvent extends StandingMerge {
  event: Merge['event']
}

/** Every merge and parting that this candidate had a part in, oldest first. */
export async function listMergeEvents(db: Kysely<DB>, candidateId: number): Promise<MergeEvent[]> {
  return mergeEvents(db)
    .where((e) => e.or([e('merge.kept_id', '=', candidateId), e('merge.merged_id', '=', candidateId)]))
    .orderBy('merge.id')
    .execute()
}

/** Rulings among these that made or undid a merge, with the candidate that was kept. */
export async function listRulingsOfMerges(
  db: Kysely<DB>,
  rulingIds: readonly number[],
): Promise<{ rulingId: number; keptId: number; event: Merge['event'] }[]> {
  return db
    .selectFrom('merge')
    .select(['ruling_id as rulingId', 'kept_id as keptId', 'event'])
    .where('ruling_id', 'in', among(rulingIds))
    .execute()
}

export async function insertMerge(db: Kysely<DB>, merge: Omit<Merge, 'id'>): Promise<number> {
  const { id } = await db.insertInto('merge').values(merge).returning('id').executeTakeFirstOrThrow()
  return id
}

export interface DuplicatePair {
  firstId: number
  secondId: number
  separationArcsec: number
  decision: Decision | null
  reason: string | null
  at: IsoTime | null
}

/** Pairs of candidates of this campaign within its radius, nearest first, with the newest decision on each. */
export async function listDuplicatePairs(
  db: Kysely<DB>,
  campaignId: number,
  radiusArcsec: number,
  limit: number,
): Promise<DuplicatePair[]> {
  const { rows } = await sql<DuplicatePair>`
    select m.first_id as firstId, m.second_id as secondId, m.separation_arcsec as separationArcsec,
      d.decision, d.reason, d.created_at as at
    from candidate_match m left join match_decision d on d.id = (
      select max(id) from match_decision newest
        where newest.candidate_id = m.first_id and newest.other_id = m.second_id)
    where m.first_campaign_id = ${campaignId} and m.first_campaign_id = m.second_campaign_id
      and m.separation_arcsec <= ${radiusArcsec}
    order by m.separation_arcsec, m.first_id, m.second_id limit ${limit}`.execute(db)
  return rows
}

export interface NewDecision {
  campaignId: number
  candidateId: number
  about: { otherId: number } | { listId: number; rowNumber: number }
  decision: Decision
  reason: string
  personId: number
  now: IsoTime
}

/** Of two candidates the smaller id comes first. */
export async function insertDecision(db: Kysely<DB>, { about, ...decision }: NewDecision): Promise<number> {
  const { candidateId, campaignId, personId, now } = decision
  const pair =
    'otherId' in about
      ? {
          candidate_id: Math.min(candidateId, about.otherId),
          other_id: Math.max(candidateId, about.otherId),
          list_id: null,
          row_number: null,
        }
      : { candidate_id: candidateId, other_id: null, list_id: about.listId, row_number: about.rowNumber }
  const row = await db
    .insertInto('match_decision')
    .values({
      ...pair,
      campaign_id: campaignId,
      decision: decision.decision,
      reason: decision.reason,
      person_id: personId,
      created_at: now,
    })
    .returning('id')
    .executeTakeFirstOrThrow()
  return row.id
}

export interface OtherCampaignMatch {
  candidateId: number
  otherId: number
  name: string
  campaign: string
  slug: string
  separationArcsec: number
}

/**
 * Candidates of other campaigns at the places of these, as far as the person is a member there. A grader there is told those that they
 * have judged and that are decided: what is missing at a place would else tell a calibration stamp, which matches nothing.
 */
export async function listOtherCampaignMatches(
  db: Kysely<DB>,
  personId: number,
  candidateIds: readonly number[],
): Promise<OtherCampaignMatch[]> {
  const isTold = sql<SqlBool>`other.state in ('confirmed', 'set aside') and exists (select 1 from judged
    where judged.campaign_id = campaign.id and judged.person_id = ${personId} and judged.candidate_id = other.id)`
  const side = (own: 'first' | 'second', other: 'first' | 'second') => sql<OtherCampaignMatch>`
    select m.${sql.raw(own)}_id as candidateId, other.id as otherId, other.name, campaign.name as campaign, campaign.slug,
      m.separation_arcsec as separationArcsec
    from candidate_match m join candidate other on other.id = m.${sql.raw(other)}_id
      join campaign on campaign.id = m.${sql.raw(other)}_campaign_id
      join campaign own on own.id = m.${sql.raw(own)}_campaign_id
      join membership on membership.campaign_id = campaign.id and membership.person_id = ${personId}
        and membership.ended_at is null
    where m.${sql.raw(own)}_id in ${among(candidateIds)} and m.first_campaign_id <> m.second_campaign_id
      and m.separation_arcsec <= own.match_radius_arcsec and (membership.role <> 'grader' or ${isTold})`
  const { rows } = await sql<OtherCampaignMatch>`${side('first', 'second')} union all ${side('second', 'first')}
    order by separationArcsec`.execute(db)
  return rows
}

/** Names and states of candidates of the campaign, for showing them beside each other; calibration is none. */
export async function listMembers(
  db: Kysely<DB>,
  campaignId: number,
  candidateIds: readonly number[],
): Promise<
  { id: number; name: string; state: CandidateState; raDeg: number; decDeg: number; rulingId: number | null }[]
> {
  return db
    .selectFrom('candidate')
    .select(['id', 'name', 'state', 'ra_deg as raDeg', 'dec_deg as decDeg', 'ruling_id as rulingId'])
    .where(inCampaign('campaign_id', campaignId))
    .where('id', 'in', among(candidateIds))
    .where('truth', 'is', null)
    .$narrowType<{ raDeg: number; decDeg: number }>()
    .execute()
}

export interface DuplicateOf {
  id: number
  name: string
  state: CandidateState
  separationArcsec: number
  decision: Decision | null
}

/** Candidates of the campaign within the radius of this one, nearest first. */
export async function listDuplicatesOf(
  db: Kysely<DB>,
  campaignId: number,
  candidateId: number,
  radiusArcsec: number,
): Promise<DuplicateOf[]> {
  const { rows } = await sql<DuplicateOf>`
    select other.id, other.name, other.state, m.separation_arcsec as separationArcsec,
      (select d.decision from match_decision d
        where d.candidate_id = m.first_id and d.other_id = m.second_id order by d.id desc limit 1) as decision
    from (select first_id, second_id, second_id as other_id, separation_arcsec from candidate_match
            where first_id = ${candidateId}
          union all select first_id, second_id, first_id, separation_arcsec from candidate_match
            where second_id = ${candidateId}) m
      join candidate other on other.id = m.other_id
    where other.campaign_id = ${campaignId} and other.truth is null and m.separation_arcsec <= ${radiusArcsec}
    order by m.separation_arcsec, other.id`.execute(db)
  return rows
}
