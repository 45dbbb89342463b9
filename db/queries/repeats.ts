import { sql, type Kysely, type SqlBool } from 'kysely'
import type { DB } from '../schema'
import type { GradeLetter, GradeRow } from '../schema/grading'
import type { QueuedCandidate } from './queue'

interface Who {
  campaignId: number
  personId: number
}

const SHOWN = ['candidate.id', 'candidate.name', 'candidate.ra_deg as raDeg', 'candidate.dec_deg as decDeg'] as const

/** What others made of it has not been shown to the person: from then on their answer says nothing of their constancy. */
const notShown = (table: string, personId: number) => sql<SqlBool>`not exists (select 1 from judgement_shown shown
  where shown.candidate_id = ${sql.ref(`${table}.candidate_id`)} and shown.person_id = ${personId})`

export interface RepeatCandidate extends QueuedCandidate {
  /** Quarter turns 0 to 3, mirrored first from 4 on. */
  turned: number
}

/** Own candidates that have come back to this person and wait for an answer, the longest first; none that they know by now. */
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
    .where(notShown('repeat_look', personId))
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

/** Of the newest first looks of this person, the oldest first, whether each may come back later. */
export async function listRecentLooks(
  db: Kysely<DB>,
  { campaignId, personId }: Who,
  looks: number,
): Promise<boolean[]> {
  const rows = await db
    .selectFrom('grade')
    .innerJoin('candidate', 'candidate.id', 'grade.candidate_id')
    .select(
      sql<0 | 1>`grade.grade <> 'U' and candidate.truth is null and ${notShown('grade', personId)}
        and not exists (select 1 from repeat_look back where back.candidate_id = candidate.id and back.person_id = ${personId})`.as(
        'mayComeBack',
      ),
    )
    .where('grade.campaign_id', '=', campaignId)
    .where('grade.person_id', '=', personId)
    .where('grade.occasion', '=', 'first')
    .where('grade.replaces', 'is', null)
    .orderBy('grade.id', 'desc')
    .limit(looks)
    .execute()
  return rows.map(({ mayComeBack }) => mayComeBack === 1).reverse()
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

/**
 * What a person said of a candidate first, as it stood when it came back, and what they said then: pairs that are both grades, and how
 * many were not. Correcting the first afterwards changes nothing.
 */
export async function listRepeatPairs(
  db: Kysely<DB>,
  { campaignId, personId }: Who,
): Promise<{ first: GradeLetter; again: GradeLetter }[]> {
  const newest = (occasion: string, more: ReturnType<typeof sql>) =>
    sql<GradeLetter>`(select grade.grade from grade where grade.candidate_id = repeat_look.candidate_id
      and grade.person_id = ${personId} and grade.occasion = ${occasion} ${more} order by grade.id desc limit 1)`
  const before = sql`and grade.id < (select min(again.id) from grade again
    where again.candidate_id = repeat_look.candidate_id and again.person_id = ${personId} and again.occasion = 'repeat')`
  return db
    .selectFrom('repeat_look')
    .select([newest('first', before).as('first'), newest('repeat', sql``).as('again')])
    .where('repeat_look.campaign_id', '=', campaignId)
    .where('repeat_look.person_id', '=', personId)
    .where('repeat_look.grade_id', 'is not', null)
    .execute()
}
