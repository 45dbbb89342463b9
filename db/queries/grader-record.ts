import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'
import type { GradeLetter } from '../schema/grading'

interface Who {
  campaignId: number
  personId: number
}

/** First grades that stand, by letter, calibration stamps among them. */
export async function countByLetter(
  db: Kysely<DB>,
  { campaignId, personId }: Who,
): Promise<{ grade: GradeLetter; n: number }[]> {
  return db
    .selectFrom('grade')
    .select((e) => ['grade.grade', e.fn.countAll<number>().as('n')])
    .where('campaign_id', '=', campaignId)
    .where('person_id', '=', personId)
    .where('occasion', '=', 'first')
    .where(sql<boolean>`not exists (select 1 from grade later where later.replaces = grade.id)`)
    .groupBy('grade.grade')
    .execute()
}

/** Looks of every occasion by UTC day, the newest first. */
export async function countByDay(
  db: Kysely<DB>,
  { campaignId, personId }: Who,
  limit: number,
): Promise<{ day: string; n: number }[]> {
  return db
    .selectFrom('grade')
    .select((e) => [sql<string>`substr(given_at, 1, 10)`.as('day'), e.fn.countAll<number>().as('n')])
    .where('campaign_id', '=', campaignId)
    .where('person_id', '=', personId)
    .where('replaces', 'is', null)
    .groupBy('day')
    .orderBy('day', 'desc')
    .limit(limit)
    .execute()
}

/** Seconds taken over the newest looks that tell them. */
export async function listSeconds(db: Kysely<DB>, { campaignId, personId }: Who, limit: number): Promise<number[]> {
  const rows = await db
    .selectFrom('grade')
    .select('seconds')
    .where('campaign_id', '=', campaignId)
    .where('person_id', '=', personId)
    .where('replaces', 'is', null)
    .where('seconds', 'is not', null)
    .orderBy('id', 'desc')
    .limit(limit)
    .$narrowType<{ seconds: number }>()
    .execute()
  return rows.map(({ seconds }) => seconds)
}

/** First answers to calibration stamps at the bench, in order; what was corrected later is as it was first. */
export async function listCalibrationAnswers(
  db: Kysely<DB>,
  { campaignId, personId }: Who,
): Promise<{ truth: 'lens' | 'not a lens'; grade: GradeLetter }[]> {
  return db
    .selectFrom('grade')
    .innerJoin('candidate', 'candidate.id', 'grade.candidate_id')
    .select(['candidate.truth', 'grade.grade'])
    .where('grade.campaign_id', '=', campaignId)
    .where('grade.person_id', '=', personId)
    .where('grade.occasion', '=', 'first')
    .where('grade.replaces', 'is', null)
    .where('candidate.truth', 'is not', null)
    .orderBy('grade.id')
    .$narrowType<{ truth: 'lens' | 'not a lens' }>()
    .execute()
}

export interface GraderRow {
  id: number
  name: string
  role: string
  ended: 0 | 1
}

/** Who grades or has graded in the campaign. */
export async function listGraders(db: Kysely<DB>, campaignId: number): Promise<GraderRow[]> {
  return db
    .selectFrom('membership')
    .innerJoin('person', 'person.id', 'membership.person_id')
    .select(['person.id', 'person.name', 'membership.role', sql<0 | 1>`membership.ended_at is not null`.as('ended')])
    .where('membership.campaign_id', '=', campaignId)
    .where('membership.role', 'in', ['lead', 'grader'])
    .orderBy('person.name')
    .execute()
}
