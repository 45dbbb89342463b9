import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'
import type { CandidateState } from '../schema/intake'
import type { ReleasedLabel } from '../schema/releases'
import { fromJson, type Json } from '../schema/values'

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

/** What a release says of a candidate, in its entry or, where it is none, in `candidates.csv`; by the name it has in `changes.csv`. */
const said = (candidate: string, entry: string) =>
  sql.raw(`(select json_object(
  'class', ${entry}.class, 'name', c.name, 'designation', c.designation, 'position', json_array(c.ra_deg, c.dec_deg),
  'ruling', case when r.outcome <> 'by verdict' then r.outcome || ifnull(' ' || r.grade, '') || ': ' || r.reason end,
  'grades', case when ${entry}.id is null then printf('%d, %d cannot judge', v.grades, v.cannot_judge)
    else printf('A %d, B %d, C %d, N %d, %d cannot judge', ${entry}.votes_a, ${entry}.votes_b, ${entry}.votes_c,
      ${entry}.votes_n, ${entry}.cannot_judge) end,
  'mean', iif(${entry}.id is null, v.mean, ${entry}.mean), 'spread', iif(${entry}.id is null, v.spread, ${entry}.spread),
  'probability', iif(${entry}.id is null, v.probability, ${entry}.probability),
  'known objects', ${entry}.known_as, 'Einstein radius', ${entry}.einstein_radius_arcsec,
  'error of the radius', ${entry}.einstein_radius_error_arcsec, 'measured by', ${entry}.n_measured,
  'lens redshift', c.lens_redshift, 'source redshift', c.source_redshift, 'remarks', ${entry}.remarks,
  'tags', ${entry}.tags, 'pictures', ${entry}.stamps)
  from release_candidate c left join ruling r on r.id = c.ruling_id left join verdict v on v.id = c.verdict_id
  where c.release_id = ${candidate}.release_id and c.candidate_id = ${candidate}.candidate_id)`)

export interface SaidOfCandidate {
  class: string | null
  name: string
  designation: string | null
  position: [raDeg: number | null, decDeg: number | null]
  ruling: string | null
  grades: string
  mean: number | null
  spread: number | null
  probability: number | null
  /** As JSON, null where it is no entry. */
  'known objects': Json<ReleasedLabel[]> | null
  'Einstein radius': number | null
  'error of the radius': number | null
  'measured by': number | null
  'lens redshift': number | null
  'source redshift': number | null
  remarks: string | null
  tags: string | null
  pictures: string | null
}

export interface CandidateBeside {
  candidateId: number
  fromState: CandidateState | null
  toState: CandidateState | null
  /** null where the release does not have it. */
  from: SaidOfCandidate | null
  to: SaidOfCandidate | null
}

/** What two releases say of each candidate that either has, changed or not, by candidate. */
export async function listBeside(
  db: Kysely<DB>,
  releases: { from: number; to: number },
  page: { after: number; limit: number },
): Promise<CandidateBeside[]> {
  const { from, to } = releases
  type Row = Record<'from' | 'to', Json<SaidOfCandidate> | null> & Omit<CandidateBeside, 'from' | 'to'>
  const { rows } = await sql<Row>`
    with both as (
      select candidate_id from (select candidate_id from release_candidate
        where release_id = ${from} and candidate_id > ${page.after} order by candidate_id limit ${page.limit})
      union
      select candidate_id from (select candidate_id from release_candidate
        where release_id = ${to} and candidate_id > ${page.after} order by candidate_id limit ${page.limit})
      order by candidate_id limit ${page.limit}
    )
    select both.candidate_id as candidateId, old.state as fromState, new.state as toState,
        ${said('old', 'before')} as "from", ${said('new', 'after')} as "to"
      from both
      left join release_candidate old on old.release_id = ${from} and old.candidate_id = both.candidate_id
      left join release_candidate new on new.release_id = ${to} and new.candidate_id = both.candidate_id
      left join release_entry before on before.release_id = ${from} and before.candidate_id = both.candidate_id
      left join release_entry after on after.release_id = ${to} and after.candidate_id = both.candidate_id
      order by both.candidate_id`.execute(db)
  return rows.map((row) => ({ ...row, from: row.from && fromJson(row.from), to: row.to && fromJson(row.to) }))
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
