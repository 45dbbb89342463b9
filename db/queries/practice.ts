import { sql, type Kysely, type SqlBool } from 'kysely'
import type { DB } from '../schema'
import type { GradeLetter } from '../schema/grading'
import type { Json } from '../schema/values'
import type { QueuedCandidate } from './queue'

export interface StampOfPractice extends QueuedCandidate {
  answered: 0 | 1
  /** Neither answered in practice, nor graded, nor on this person's bench or sheet. */
  unmet: 0 | 1
}

/** Imaged calibration stamps of the campaign, as this person has met them. */
export async function listPracticeStamps(
  db: Kysely<DB>,
  { campaignId, personId }: { campaignId: number; personId: number },
): Promise<StampOfPractice[]> {
  const met = (table: string) =>
    sql<SqlBool>`exists (select 1 from ${sql.table(table)} met
      where met.candidate_id = candidate.id and met.person_id = ${personId})`
  const anywhere = sql.join(['practice_answer', 'grade', 'lease', 'sheet_mark', 'sheet_lease'].map(met), sql` or `)
  return db
    .selectFrom('candidate')
    .select(['candidate.id', 'candidate.name', 'candidate.ra_deg as raDeg', 'candidate.dec_deg as decDeg'])
    .select([sql<0 | 1>`${met('practice_answer')}`.as('answered'), sql<0 | 1>`not (${anywhere})`.as('unmet')])
    .where('candidate.campaign_id', '=', campaignId)
    .where('candidate.truth', 'is not', null)
    .where('candidate.imaged_at', 'is not', null)
    .execute()
}

/** From now on this person's practice half stays away from their bench. */
export async function setPractises(
  db: Kysely<DB>,
  { campaignId, personId }: { campaignId: number; personId: number },
): Promise<void> {
  await db
    .updateTable('membership')
    .set({ practises: 1 })
    .where('campaign_id', '=', campaignId)
    .where('person_id', '=', personId)
    .where('practises', '=', 0)
    .execute()
}

export async function isPracticeUid(db: Kysely<DB>, uid: string): Promise<boolean> {
  return (await db.selectFrom('practice_answer').select('id').where('uid', '=', uid).executeTakeFirst()) !== undefined
}

export interface StampTruth {
  name: string
  truth: 'lens' | 'not a lens'
  explanation: string | null
  painting: Json<unknown> | null
}

export async function findStampTruth(
  db: Kysely<DB>,
  campaignId: number,
  candidateId: number,
): Promise<StampTruth | null> {
  const row = await db
    .selectFrom('candidate')
    .select(['name', 'truth', 'explanation', 'painting'])
    .where('campaign_id', '=', campaignId)
    .where('id', '=', candidateId)
    .where('truth', 'is not', null)
    .$narrowType<{ truth: 'lens' | 'not a lens' }>()
    .executeTakeFirst()
  return row ?? null
}

export async function findPracticeAnswer(
  db: Kysely<DB>,
  candidateId: number,
  personId: number,
): Promise<{ grade: GradeLetter } | null> {
  const row = await db
    .selectFrom('practice_answer')
    .select('grade')
    .where('candidate_id', '=', candidateId)
    .where('person_id', '=', personId)
    .executeTakeFirst()
  return row ?? null
}

export async function insertPracticeAnswer(
  db: Kysely<DB>,
  answer: {
    uid: string
    campaignId: number
    candidateId: number
    personId: number
    grade: GradeLetter
    seconds: number | null
    now: string
  },
): Promise<void> {
  await db
    .insertInto('practice_answer')
    .values({
      uid: answer.uid,
      campaign_id: answer.campaignId,
      candidate_id: answer.candidateId,
      person_id: answer.personId,
      grade: answer.grade,
      seconds: answer.seconds,
      given_at: answer.now,
    })
    .execute()
}

export interface TruthAndGrade {
  truth: 'lens' | 'not a lens'
  grade: GradeLetter
  n: number
}

/** A person's answers in practice, by truth and grade. */
export async function countPracticeAnswers(
  db: Kysely<DB>,
  campaignId: number,
  personId: number,
): Promise<TruthAndGrade[]> {
  return db
    .selectFrom('practice_answer')
    .innerJoin('candidate', 'candidate.id', 'practice_answer.candidate_id')
    .select((e) => ['candidate.truth', 'practice_answer.grade', e.fn.countAll<number>().as('n')])
    .where('practice_answer.campaign_id', '=', campaignId)
    .where('practice_answer.person_id', '=', personId)
    .where('candidate.truth', 'is not', null)
    .groupBy(['candidate.truth', 'practice_answer.grade'])
    .$narrowType<{ truth: 'lens' | 'not a lens' }>()
    .execute()
}

/** Whether this person has given any grade in the campaign. */
export async function hasGraded(db: Kysely<DB>, campaignId: number, personId: number): Promise<boolean> {
  const row = await db
    .selectFrom('grade')
    .select('id')
    .where('campaign_id', '=', campaignId)
    .where('person_id', '=', personId)
    .limit(1)
    .executeTakeFirst()
  return row !== undefined
}
