import { sql, type Kysely, type SqlBool } from 'kysely'
import type { DB } from '../schema'
import type { GradeLetter, GradeRow } from '../schema/grading'
import type { QueuedCandidate } from './queue'

interface Who {
  campaignId: number
  personId: number
}

const SHOWN = ['candidate.id', 'candidate.name', 'candidate.ra_deg as raDeg', 'candidate.dec_deg as decDeg'] as const

export interface RepeatCandidate extends QueuedCandidate {
  /** Quarter turns 0 to 3, mirrored first from 4 on. */
  turned: number
}

/** Own candidates that have come back to this person and wait for an answer, the longest first. */
export async function listOpenRepeats(db: Kysely<DB>, { campaignId, personId }: Who): Promise<RepeatCandidate[]> {
  return db
    .selectFrom('repeat_look')
    .innerJoin('candidate', 'candidate.id', 'repeat_look.candidate_id')
    .select(SHOWN)
    .select('repeat_look.turned')
    .where('repeat_look.campaign_id', '=', campaignId)
    .where('repeat_look.person_id', '=', personId)
    .where('repeat_look.grade_id', 'is', null)
    .where('candidate.imaged_at', 'is not', null)
    .orderBy('repeat_look.id')
    .execute()
}

/**
 * Ordinary candidates that this person judged at least `looksAgo` looks ago, whose judgement by others they have not been shown, and
 * that have not come back yet; the newest `limit` of them.
 */
export async function listRepeatable(
  db: Kysely<DB>,
  { campaignId, personId }: Who,
  { looksAgo, limit }: { looksAgo: number; limit: number },
): Promise<QueuedCandidate[]> {
  const none = (table: string, more: ReturnType<typeof sql<SqlBool>>) =>
    sql<SqlBool>`not exists (select 1 from ${sql.table(table)} other
      where other.candidate_id = candidate.id and other.person_id = ${personId} and ${more})`
  return db
    .selectFrom((e) =>
      e
        .selectFrom('grade')
        .select(['grade.id', 'grade.candidate_id', 'grade.grade'])
        .where('grade.campaign_id', '=', campaignId)
        .where('grade.person_id', '=', personId)
        .where('grade.occasion', '=', 'first')
        .where('grade.replaces', 'is', null)
        .orderBy('grade.id', 'desc')
        .limit(limit)
        .offset(looksAgo)
        .as('own'),
    )
    .innerJoin('candidate', 'candidate.id', 'own.candidate_id')
    .select(SHOWN)
    .where('own.grade', '!=', 'U')
    .where('candidate.truth', 'is', null)
    .where('candidate.imaged_at', 'is not', null)
    .where(none('repeat_look', sql<SqlBool>`true`))
    .where(none('judgement_shown', sql<SqlBool>`true`))
    .where(none('asked_look', sql<SqlBool>`other.withdrawn_at is null`))
    .orderBy('own.id')
    .execute()
}

export async function insertRepeatLooks(
  db: Kysely<DB>,
  { campaignId, personId }: Who,
  looks: readonly { candidateId: number; turned: number }[],
  now: string,
): Promise<void> {
  if (looks.length === 0) return
  await db
    .insertInto('repeat_look')
    .values(
      looks.map(({ candidateId, turned }) => ({
        campaign_id: campaignId,
        candidate_id: candidateId,
        person_id: personId,
        turned,
        lent_at: now,
        grade_id: null,
      })),
    )
    .execute()
}

export async function findRepeatLook(
  db: Kysely<DB>,
  candidateId: number,
  personId: number,
): Promise<{ id: number; turned: number } | null> {
  const row = await db
    .selectFrom('repeat_look')
    .select(['id', 'turned'])
    .where('candidate_id', '=', candidateId)
    .where('person_id', '=', personId)
    .executeTakeFirst()
  return row ?? null
}

/** The newest answer to a repeated look. */
export async function findRepeatAnswer(
  db: Kysely<DB>,
  candidateId: number,
  personId: number,
): Promise<GradeRow | null> {
  const row = await db
    .selectFrom('grade')
    .selectAll()
    .where('candidate_id', '=', candidateId)
    .where('occasion', '=', 'repeat')
    .where('person_id', '=', personId)
    .orderBy('id', 'desc')
    .limit(1)
    .executeTakeFirst()
  return row ?? null
}

export async function setRepeatAnswered(db: Kysely<DB>, repeatId: number, gradeId: number): Promise<void> {
  await db.updateTable('repeat_look').set({ grade_id: gradeId }).where('id', '=', repeatId).execute()
}

/** What a person said of a candidate first, and when it came back: pairs that are both grades, and how many were not. */
export async function listRepeatPairs(
  db: Kysely<DB>,
  { campaignId, personId }: Who,
): Promise<{ first: GradeLetter; again: GradeLetter }[]> {
  const newest = (occasions: string) =>
    sql<GradeLetter>`(select grade.grade from grade where grade.candidate_id = repeat_look.candidate_id
      and grade.person_id = ${personId} and grade.occasion in (${sql.raw(occasions)}) order by grade.id desc limit 1)`
  return db
    .selectFrom('repeat_look')
    .select([newest("'first'").as('first'), newest("'repeat'").as('again')])
    .where('repeat_look.campaign_id', '=', campaignId)
    .where('repeat_look.person_id', '=', personId)
    .where('repeat_look.grade_id', 'is not', null)
    .execute()
}
