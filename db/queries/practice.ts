import type { Kysely } from 'kysely'
import type { DB } from '../schema'
import type { GradeLetter } from '../schema/grading'
import type { Json } from '../schema/values'

export interface PracticeCounts {
  wanted: number
  /** Imaged calibration stamps of the campaign. */
  stamps: number
  answered: number
}

export async function findPracticeCounts(
  db: Kysely<DB>,
  campaignId: number,
  personId: number,
): Promise<PracticeCounts> {
  return db
    .selectFrom('campaign')
    .select((e) => [
      'practice_wanted as wanted',
      e
        .selectFrom('candidate')
        .select((c) => c.fn.countAll<number>().as('n'))
        .where('candidate.campaign_id', '=', campaignId)
        .where('candidate.truth', 'is not', null)
        .where('candidate.imaged_at', 'is not', null)
        .$asScalar()
        .$notNull()
        .as('stamps'),
      e
        .selectFrom('practice_answer')
        .select((p) => p.fn.countAll<number>().as('n'))
        .where('practice_answer.campaign_id', '=', campaignId)
        .where('practice_answer.person_id', '=', personId)
        .$asScalar()
        .$notNull()
        .as('answered'),
    ])
    .where('id', '=', campaignId)
    .executeTakeFirstOrThrow()
}

export interface StampTruth {
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
    .select(['truth', 'explanation', 'painting'])
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
