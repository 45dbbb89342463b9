import { sql, type Kysely, type RawBuilder, type SqlBool } from 'kysely'
import type { DB } from '../schema'
import { listOpenBuckets } from './queue-walk'

/** Whose queue it is, and how many grades a candidate of the campaign may have. */
export interface Asker {
  campaignId: number
  personId: number
  gradesWanted: number
  /** Candidates that are settled want no more looks, unless a lead has asked for one. */
  untilSettled: boolean
  /** Only what the first pass has sent on is served. */
  usesSheet: boolean
  now: string
}

const DECIDING_RULINGS = ['confirmed', 'set aside'] as const

/** Why a candidate still wants looks: a lead has asked for more than the rule wants, or the rule or a lead wants them. */
type Wanted = 'by lead' | 'either'

type WantedLooks = Pick<Asker, 'gradesWanted' | 'untilSettled' | 'usesSheet'>

const notSentOn = ({ usesSheet }: WantedLooks) =>
  usesSheet ? sql<SqlBool>`candidate.first_pass <> 'sent on'` : sql<SqlBool>`false`

/** 'by lead' walks the index `candidate_asked`; what the rule wants is walked as queue-walk.ts says, and shares no candidate with it. */
const WANTED: Record<Wanted, (asker: WantedLooks) => RawBuilder<SqlBool>> = {
  'by lead': (asker) =>
    sql<SqlBool>`candidate.looks_asked > candidate.grades_given and (+candidate.grades_given >= ${asker.gradesWanted}
      or (${asker.untilSettled ? 1 : 0} and +candidate.settled = 1) or ${notSentOn(asker)})`,
  either: (asker) =>
    sql<SqlBool>`+candidate.grades_given < max(${asker.gradesWanted}, candidate.looks_asked)
      and (candidate.looks_asked > candidate.grades_given
        or ((${asker.untilSettled ? 0 : 1} or +candidate.settled = 0) and not ${notSentOn(asker)}))`,
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

/** Open to this person, with room for one more look, and not on their bench yet. */
function lendable(db: Kysely<DB>, asker: Asker, wanted: 'by lead') {
  return notOnBench(db, asker, wanted).where(hasRoom(asker))
}

function notOnBench(db: Kysely<DB>, asker: Asker, wanted: 'by lead') {
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

/** How many candidates this person may still be shown, those on other people's benches included: counters, and a few rows. */
export async function countOpenCandidates(db: Kysely<DB>, asker: Asker): Promise<number> {
  const byRule = (await listOpenBuckets(db, asker)).reduce((sum, { open }) => sum + open, 0)
  const byLead = await openTo(db, asker, 'by lead')
    .select((e) => e.fn.countAll<number>().as('n'))
    .executeTakeFirstOrThrow()
  return byRule + byLead.n
}

export async function countGradedCandidates(db: Kysely<DB>, campaignId: number, personId: number): Promise<number> {
  const row = await db
    .selectFrom('look_count')
    .select('n')
    .where('campaign_id', '=', campaignId)
    .where('person_id', '=', personId)
    .where('occasion', '=', 'first')
    .executeTakeFirst()
  return row?.n ?? 0
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
