import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'
import type { CandidateState, StateCause } from '../schema/intake'
import type { IsoTime } from '../schema/values'

export interface CandidateStanding {
  id: number
  state: CandidateState
  raDeg: number | null
  decDeg: number | null
  designation: string | null
  /** A ruling stands over verdicts unless it handed the candidate back. */
  ruled: boolean
}

export async function listStandings(db: Kysely<DB>, candidateIds: readonly number[]): Promise<CandidateStanding[]> {
  const rows = await db
    .selectFrom('candidate')
    .leftJoin('designation', 'designation.candidate_id', 'candidate.id')
    .leftJoin('ruling', 'ruling.id', 'candidate.ruling_id')
    .select([
      'candidate.id',
      'candidate.state',
      'candidate.ra_deg as raDeg',
      'candidate.dec_deg as decDeg',
      'designation.designation',
      'ruling.outcome',
    ])
    .where(sql<boolean>`candidate.id in (select value from json_each(${JSON.stringify(candidateIds)}))`)
    .orderBy('candidate.id')
    .execute()
  return rows.map(({ outcome, ...row }) => ({ ...row, ruled: outcome !== null && outcome !== 'by verdict' }))
}

/** Confirmed candidates that had no position when they were confirmed and have one now. */
export async function listConfirmedToName(db: Kysely<DB>, campaignId: number): Promise<CandidateStanding[]> {
  const rows = await db
    .selectFrom('candidate')
    .leftJoin('designation', 'designation.candidate_id', 'candidate.id')
    .select(['candidate.id', 'candidate.state', 'candidate.ra_deg as raDeg', 'candidate.dec_deg as decDeg'])
    .where('candidate.campaign_id', '=', campaignId)
    .where('candidate.state', '=', 'confirmed')
    .where('candidate.ra_deg', 'is not', null)
    .where('candidate.dec_deg', 'is not', null)
    .where('designation.candidate_id', 'is', null)
    .orderBy('candidate.id')
    .execute()
  return rows.map((row) => ({ ...row, designation: null, ruled: false }))
}

export interface StateWrite {
  candidateId: number
  from: CandidateState
  to: CandidateState
  /** What the state rests on from now. */
  restsOn: { cause: StateCause; id: number }
  /** What made it change. */
  changedBy: { cause: StateCause; id: number }
}

/** Writes states with their causes; where the state differs, the change and the catalogue's entry with it. */
export async function writeStates(
  db: Kysely<DB>,
  campaignId: number,
  writes: readonly StateWrite[],
  now: IsoTime,
): Promise<void> {
  if (writes.length === 0) return
  const changes = writes.filter((write) => write.from !== write.to)
  await sql`
    update candidate set
      state = w.value ->> 'to',
      state_cause = w.value ->> 'cause',
      state_cause_id = w.value ->> 'causeId',
      state_since = case when state = w.value ->> 'to' then state_since else ${now} end
    from json_each(${JSON.stringify(
      writes.map((w) => ({ id: w.candidateId, to: w.to, cause: w.restsOn.cause, causeId: w.restsOn.id })),
    )}) w
    where candidate.id = w.value ->> 'id'`.execute(db)
  if (changes.length === 0) return
  await db
    .insertInto('state_change')
    .values(
      changes.map((change) => ({
        candidate_id: change.candidateId,
        from_state: change.from,
        to_state: change.to,
        cause: change.changedBy.cause,
        cause_id: change.changedBy.id,
        at: now,
      })),
    )
    .execute()
  const moves = changes.filter((change) => change.from === 'confirmed' || change.to === 'confirmed')
  if (moves.length === 0) return
  await db
    .insertInto('entry')
    .values(
      moves.map((move) => ({
        campaign_id: campaignId,
        candidate_id: move.candidateId,
        event: move.to === 'confirmed' ? ('entered' as const) : ('left' as const),
        cause: move.changedBy.cause,
        cause_id: move.changedBy.id,
        at: now,
      })),
    )
    .execute()
}

/** Which of the names the campaign has given already. */
export async function listTakenDesignations(
  db: Kysely<DB>,
  campaignId: number,
  names: readonly string[],
): Promise<Set<string>> {
  const rows = await db
    .selectFrom('designation')
    .select('designation')
    .where('campaign_id', '=', campaignId)
    .where(sql<boolean>`designation in (select value from json_each(${JSON.stringify(names)}))`)
    .execute()
  return new Set(rows.map((row) => row.designation))
}

export async function insertDesignations(
  db: Kysely<DB>,
  campaignId: number,
  named: readonly { candidateId: number; designation: string }[],
  now: IsoTime,
): Promise<void> {
  if (named.length === 0) return
  await db
    .insertInto('designation')
    .values(
      named.map(({ candidateId, designation }) => ({
        candidate_id: candidateId,
        campaign_id: campaignId,
        designation,
        given_at: now,
      })),
    )
    .execute()
}
