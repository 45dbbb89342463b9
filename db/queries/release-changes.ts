import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'
import type { CandidateState } from '../schema/intake'

/** The release before that a new one is compared with: the newest with a catalogue that was not given up. */
export async function findReleaseBefore(
  db: Kysely<DB>,
  campaignId: number,
  number: number,
): Promise<{ id: number; number: number } | null> {
  const row = await db
    .selectFrom('release')
    .select(['id', 'number'])
    .where('campaign_id', '=', campaignId)
    .where('number', '<', number)
    .where('kind', '!=', 'retraction')
    .where('id', 'not in', (e) => e.selectFrom('release_given_up').select('release_id'))
    .orderBy('number', 'desc')
    .limit(1)
    .executeTakeFirst()
  return row ?? null
}

export interface CandidateBeside {
  candidateId: number
  name: string
  designation: string | null
  fromState: CandidateState | null
  toState: CandidateState | null
  fromName: string | null
  fromRaDeg: number | null
  fromDecDeg: number | null
  toRaDeg: number | null
  toDecDeg: number | null
  fromClass: string | null
  toClass: string | null
}

/** What two releases say of each candidate that either has, changed or not, by candidate. */
export async function listBeside(
  db: Kysely<DB>,
  releases: { from: number; to: number },
  page: { after: number; limit: number },
): Promise<CandidateBeside[]> {
  const { from, to } = releases
  const { rows } = await sql<CandidateBeside>`
    with both as (
      select candidate_id from (select candidate_id from release_candidate
        where release_id = ${from} and candidate_id > ${page.after} order by candidate_id limit ${page.limit})
      union
      select candidate_id from (select candidate_id from release_candidate
        where release_id = ${to} and candidate_id > ${page.after} order by candidate_id limit ${page.limit})
      order by candidate_id limit ${page.limit}
    )
    select both.candidate_id as candidateId, coalesce(new.name, old.name) as name,
        coalesce(new.designation, old.designation) as designation, old.state as fromState, new.state as toState,
        old.name as fromName, old.ra_deg as fromRaDeg, old.dec_deg as fromDecDeg, new.ra_deg as toRaDeg,
        new.dec_deg as toDecDeg, before.class as fromClass, after.class as toClass
      from both
      left join release_candidate old on old.release_id = ${from} and old.candidate_id = both.candidate_id
      left join release_candidate new on new.release_id = ${to} and new.candidate_id = both.candidate_id
      left join release_entry before on before.release_id = ${from} and before.candidate_id = both.candidate_id
      left join release_entry after on after.release_id = ${to} and after.candidate_id = both.candidate_id
      order by both.candidate_id`.execute(db)
  return rows
}

/** What has come into the catalogue and left it since a release was frozen; by designation, at most `limit` of each. */
export async function listMovedSince(
  db: Kysely<DB>,
  campaignId: number,
  releaseId: number | null,
  limit: number,
): Promise<{ entered: string[]; enteredCount: number; left: string[]; leftCount: number }> {
  const entered = await sql<{ name: string; n: number }>`
    select coalesce(designation.designation, candidate.name) as name, count(*) over () as n
      from candidate left join designation on designation.candidate_id = candidate.id
      where candidate.campaign_id = ${campaignId} and candidate.state = 'confirmed' and candidate.truth is null
        and not exists (select 1 from release_candidate old where old.release_id = ${releaseId}
          and old.candidate_id = candidate.id and old.state = 'confirmed')
      order by name limit ${limit}`.execute(db)
  const left = await sql<{ name: string; n: number }>`
    select old.designation as name, count(*) over () as n
      from release_candidate old join candidate on candidate.id = old.candidate_id
      where old.release_id = ${releaseId} and old.state = 'confirmed' and candidate.state <> 'confirmed'
      order by name limit ${limit}`.execute(db)
  return {
    entered: entered.rows.map(({ name }) => name),
    enteredCount: entered.rows[0]?.n ?? 0,
    left: left.rows.map(({ name }) => name),
    leftCount: left.rows[0]?.n ?? 0,
  }
}
