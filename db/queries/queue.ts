import { sql, type Kysely, type RawBuilder, type SqlBool } from 'kysely'
import type { DB } from '../schema'

/** Whose queue it is, and how many grades a candidate of the campaign may have. */
export interface Asker {
  campaignId: number
  personId: number
  gradesWanted: number
  /** Candidates that are settled want no more looks, unless a lead has asked for one. */
  untilSettled: boolean
  now: string
}

const DECIDING_RULINGS = ['confirmed', 'set aside'] as const

/** Why a candidate still wants looks: the rule wants more, or a lead has asked for more than it wants. */
type Wanted = 'by rule' | 'by lead' | 'either'

type WantedLooks = Pick<Asker, 'gradesWanted' | 'untilSettled'>

/**
 * The parts 'by rule' and 'by lead' share no candidate; each walks an index of its own: `candidate_queue`, or where looks end with
 * settling `candidate_look`, and `candidate_asked`.
 */
const WANTED: Record<Wanted, (asker: WantedLooks) => RawBuilder<SqlBool>> = {
  'by rule': ({ gradesWanted, untilSettled }) =>
    untilSettled
      ? sql<SqlBool>`candidate.settled = 0 and +candidate.grades_given < ${gradesWanted}`
      : sql<SqlBool>`candidate.grades_given < ${gradesWanted}`,
  'by lead': ({ gradesWanted, untilSettled }) =>
    untilSettled
      ? sql<SqlBool>`candidate.looks_asked > candidate.grades_given
          and (+candidate.grades_given >= ${gradesWanted} or +candidate.settled = 1)`
      : sql<SqlBool>`candidate.looks_asked > candidate.grades_given and +candidate.grades_given >= ${gradesWanted}`,
  either: ({ gradesWanted, untilSettled }) =>
    untilSettled
      ? sql<SqlBool>`+candidate.grades_given < max(${gradesWanted}, candidate.looks_asked)
          and (+candidate.settled = 0 or candidate.looks_asked > candidate.grades_given)`
      : sql<SqlBool>`+candidate.grades_given < max(${gradesWanted}, candidate.looks_asked)`,
}

/** Everybody may see a calibration stamp, whatever the wanted number; those are mixed in, not lent for being wanted. */
const isStamp = sql<SqlBool>`+candidate.truth is not null`

/**
 * Candidates that this person may still be shown: imaged, short of the wanted number, not decided by a ruling that stands,
 * never graded by them. Calibration stamps are among 'either' only, which is what they may hold already.
 */
function openTo(db: Kysely<DB>, asker: Asker, wanted: Wanted) {
  const { campaignId, personId } = asker
  return db
    .selectFrom('candidate')
    .where('candidate.campaign_id', '=', campaignId)
    .where('candidate.imaged_at', 'is not', null)
    .where((e) => (wanted === 'either' ? e.or([WANTED.either(asker), isStamp]) : WANTED[wanted](asker)))
    .$if(wanted !== 'either', (query) => query.where(sql<SqlBool>`+candidate.truth is null`))
    .where((e) =>
      e.or([
        e('candidate.ruling_id', 'is', null),
        e.not(
          e.exists(
            e
              .selectFrom('ruling')
              .select('ruling.id')
              .whereRef('ruling.id', '=', 'candidate.ruling_id')
              .where('ruling.outcome', 'in', DECIDING_RULINGS),
          ),
        ),
      ]),
    )
    .where((e) =>
      e.not(
        e.exists(
          e
            .selectFrom('grade')
            .select('grade.id')
            .whereRef('grade.candidate_id', '=', 'candidate.id')
            .where('grade.person_id', '=', personId),
        ),
      ),
    )
}

function othersLeases({ personId, now }: Asker) {
  return sql<number>`(
    select count(*) from lease other where other.candidate_id = candidate.id
      and other.person_id <> ${personId} and other.until > ${now}
  )`
}

/** Room for one more person beside the grades that stand and the live leases of others. */
function hasRoom(asker: Asker) {
  return sql<SqlBool>`candidate.grades_given + ${othersLeases(asker)} < max(${asker.gradesWanted}, candidate.looks_asked)`
}

export interface QueuedCandidate {
  id: number
  name: string
  /** ICRS degrees */
  raDeg: number | null
  decDeg: number | null
}

const SHOWN = ['candidate.id', 'candidate.name', 'candidate.ra_deg as raDeg', 'candidate.dec_deg as decDeg'] as const

/** What is lent to this person now and may still be graded, in the order in which it was lent. */
export async function listLentCandidates(db: Kysely<DB>, asker: Asker, limit: number): Promise<QueuedCandidate[]> {
  return openTo(db, asker, 'either')
    .innerJoin('lease', 'lease.candidate_id', 'candidate.id')
    .select(SHOWN)
    .where('lease.campaign_id', '=', asker.campaignId)
    .where('lease.person_id', '=', asker.personId)
    .where('lease.until', '>', asker.now)
    .where((e) => e.or([hasRoom(asker), isStamp]))
    .orderBy('lease.id')
    .limit(limit)
    .execute()
}

/** What may be lent to this person next because a lead has reopened it. */
export async function listNextByLead(db: Kysely<DB>, asker: Asker, limit: number): Promise<QueuedCandidate[]> {
  return (
    lendable(db, asker, 'by lead')
      .select(SHOWN)
      // The plus keeps SQLite from walking the whole campaign in this order: there are few of them.
      .orderBy(sql`+candidate.grades_given`, 'desc')
      .orderBy('candidate.id')
      .limit(limit)
      .execute()
  )
}

/** What may be lent to this person next: those nearest to their wanted number, so that candidates get finished. */
export async function listNextByRule(db: Kysely<DB>, asker: Asker, limit: number): Promise<QueuedCandidate[]> {
  return lendable(db, asker, 'by rule')
    .select(SHOWN)
    .orderBy('candidate.grades_given', 'desc')
    .orderBy('candidate.id')
    .limit(limit)
    .execute()
}

export interface ValuedCandidate extends QueuedCandidate {
  /** Of its estimate; null without one. */
  evidence: number | null
  probability: number | null
  grades: number | null
  /** Live leases of other people. */
  heldByOthers: number
  /** Looks that could still be given, if nobody else had it on the bench. */
  room: number
}

/**
 * What may be lent to this person next, where a look tells most first, with what its worth is judged by. Whether others have taken
 * the room is left to the caller, because counting their leases once a row is what costs most here.
 */
export async function listNextByValue(db: Kysely<DB>, asker: Asker, limit: number): Promise<ValuedCandidate[]> {
  return notOnBench(db, asker, 'by rule')
    .leftJoin('estimate', 'estimate.candidate_id', 'candidate.id')
    .select(SHOWN)
    .select(['estimate.evidence', 'estimate.probability', 'estimate.grades'])
    .select(othersLeases(asker).as('heldByOthers'))
    .select(sql<number>`max(${asker.gradesWanted}, candidate.looks_asked) - candidate.grades_given`.as('room'))
    .orderBy('candidate.look_value', 'desc')
    .orderBy('candidate.id')
    .limit(limit)
    .execute()
}

/** Open to this person, with room for one more look, and not on their bench yet. */
function lendable(db: Kysely<DB>, asker: Asker, wanted: 'by lead' | 'by rule') {
  return notOnBench(db, asker, wanted).where(hasRoom(asker))
}

function notOnBench(db: Kysely<DB>, asker: Asker, wanted: 'by lead' | 'by rule') {
  return openTo(db, asker, wanted).where((e) =>
    e.not(
      e.exists(
        e
          .selectFrom('lease')
          .select('lease.id')
          .whereRef('lease.candidate_id', '=', 'candidate.id')
          .where('lease.person_id', '=', asker.personId),
      ),
    ),
  )
}

/** Live leases of everybody else in the campaign. */
export async function countOthersLeases(db: Kysely<DB>, { campaignId, personId, now }: Asker): Promise<number> {
  const row = await db
    .selectFrom('lease')
    .select((e) => e.fn.countAll<number>().as('n'))
    .where('campaign_id', '=', campaignId)
    .where('person_id', '!=', personId)
    .where('until', '>', now)
    .executeTakeFirstOrThrow()
  return row.n
}

/** How many candidates this person may still be shown, those on other people's benches included. */
export async function countOpenCandidates(db: Kysely<DB>, asker: Asker): Promise<number> {
  let open = 0
  for (const wanted of ['by rule', 'by lead'] as const) {
    const row = await openTo(db, asker, wanted)
      .select((e) => e.fn.countAll<number>().as('n'))
      .executeTakeFirstOrThrow()
    open += row.n
  }
  return open
}

export async function countGradedCandidates(db: Kysely<DB>, campaignId: number, personId: number): Promise<number> {
  const row = await db
    .selectFrom('grade')
    .select((e) => e.fn.countAll<number>().as('n'))
    .where('campaign_id', '=', campaignId)
    .where('person_id', '=', personId)
    .where('occasion', '=', 'first')
    .where('replaces', 'is', null)
    .executeTakeFirstOrThrow()
  return row.n
}

export async function hasImagedCandidate(db: Kysely<DB>, campaignId: number): Promise<boolean> {
  const row = await db
    .selectFrom('candidate')
    .select('id')
    .where('campaign_id', '=', campaignId)
    .where('imaged_at', 'is not', null)
    .limit(1)
    .executeTakeFirst()
  return row !== undefined
}

export async function deleteExpiredLeases(db: Kysely<DB>, campaignId: number, now: string): Promise<void> {
  await db.deleteFrom('lease').where('campaign_id', '=', campaignId).where('until', '<=', now).execute()
}

export async function setLeasesUntil(
  db: Kysely<DB>,
  personId: number,
  candidateIds: number[],
  until: string,
): Promise<void> {
  await db
    .updateTable('lease')
    .set({ until })
    .where('person_id', '=', personId)
    .where('candidate_id', 'in', candidateIds)
    .execute()
}

export async function insertLeases(
  db: Kysely<DB>,
  lease: { campaignId: number; personId: number; candidateIds: number[]; until: string },
): Promise<void> {
  await db
    .insertInto('lease')
    .values(
      lease.candidateIds.map((id) => ({
        campaign_id: lease.campaignId,
        candidate_id: id,
        person_id: lease.personId,
        until: lease.until,
      })),
    )
    .execute()
}

/** Of the named candidates, or of every candidate of the campaign. Answers how many there were. */
export async function deleteLeases(
  db: Kysely<DB>,
  campaignId: number,
  personId: number,
  candidateIds: number[] | null,
): Promise<number> {
  let query = db.deleteFrom('lease').where('campaign_id', '=', campaignId).where('person_id', '=', personId)
  if (candidateIds) query = query.where('candidate_id', 'in', candidateIds)
  return Number((await query.executeTakeFirst()).numDeletedRows)
}
