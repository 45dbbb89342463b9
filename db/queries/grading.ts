import { sql, type Insertable, type Kysely, type RawBuilder, type SqlBool } from 'kysely'
import type { DB } from '../schema'
import type { GradeRow, GradeTable } from '../schema/grading'
import type { IsoTime } from '../schema/values'
import { among, inCampaign } from './by-ids'

/** Those of the candidates that belong to the campaign. */
export async function listCandidatesAmong(
  db: Kysely<DB>,
  campaignId: number,
  ids: readonly number[],
): Promise<number[]> {
  const rows = await db
    .selectFrom('candidate')
    .select('id')
    .where(inCampaign('campaign_id', campaignId))
    .where('id', 'in', among(ids))
    .execute()
  return rows.map((row) => row.id)
}

/**
 * The one condition of what a grader may see: of `grade` as `own`, a standing answer of the person, on any occasion, that is a
 * grade and not 'cannot judge', where no lead waits for another look of theirs. `person` is a number or a column.
 */
export function isOwnJudgement(person: number | RawBuilder<number>): RawBuilder<SqlBool> {
  return sql<SqlBool>`+own.person_id = ${person} and own.grade != 'U'
    and not exists (select 1 from grade newer where newer.replaces = own.id)
    and not exists (select 1 from asked_look ask where ask.candidate_id = own.candidate_id
      and ask.person_id = ${person} and ask.grade_id is null and ask.withdrawn_at is null)`
}

/** Those of the candidates that the person has judged. */
export async function listJudgedAmong(
  db: Kysely<DB>,
  campaignId: number,
  personId: number,
  ids: readonly number[],
): Promise<number[]> {
  const rows = await db
    .selectFrom('grade as own')
    .select('own.candidate_id')
    .distinct()
    .where(inCampaign('own.campaign_id', campaignId))
    .where('own.candidate_id', 'in', among(ids))
    .where(isOwnJudgement(personId))
    .execute()
  return rows.map((row) => row.candidate_id)
}

export interface CandidateToGrade {
  id: number
  name: string
  imaged_at: string | null
  grades_given: number
  looks_asked: number
  /** Everybody may grade a calibration stamp: no number of looks is wanted of it. */
  is_calibration: 0 | 1
}

export async function findCandidateToGrade(
  db: Kysely<DB>,
  campaignId: number,
  candidateId: number,
): Promise<CandidateToGrade | null> {
  const row = await db
    .selectFrom('candidate')
    .select(['id', 'name', 'imaged_at', 'grades_given', 'looks_asked'])
    .select(sql<0 | 1>`truth is not null`.as('is_calibration'))
    .where('id', '=', candidateId)
    .where('campaign_id', '=', campaignId)
    .executeTakeFirst()
  return row ?? null
}

export async function findGradeByUid(db: Kysely<DB>, uid: string): Promise<GradeRow | null> {
  return (await db.selectFrom('grade').selectAll().where('uid', '=', uid).executeTakeFirst()) ?? null
}

/** The person's answer that counts: the newest, given first, asked for, or corrected since. */
export async function findStandingAnswer(
  db: Kysely<DB>,
  candidateId: number,
  personId: number,
): Promise<GradeRow | null> {
  return findNewestAnswer(db, candidateId, personId, ['first', 'asked'])
}

/** The person's newest answer that came when the candidate had all its looks. */
export async function findLateAnswer(db: Kysely<DB>, candidateId: number, personId: number): Promise<GradeRow | null> {
  return findNewestAnswer(db, candidateId, personId, ['late'])
}

async function findNewestAnswer(
  db: Kysely<DB>,
  candidateId: number,
  personId: number,
  occasions: readonly GradeRow['occasion'][],
): Promise<GradeRow | null> {
  const row = await db
    .selectFrom('grade')
    .selectAll()
    .where('candidate_id', '=', candidateId)
    .where('occasion', 'in', occasions)
    .where('person_id', '=', personId)
    .orderBy('id', 'desc')
    .limit(1)
    .executeTakeFirst()
  return row ?? null
}

export async function insertGrade(db: Kysely<DB>, grade: Insertable<GradeTable>): Promise<GradeRow> {
  return db.insertInto('grade').values(grade).returningAll().executeTakeFirstOrThrow()
}

/** One more person has given a first grade; their lease has served. */
export async function setFirstGradeGiven(db: Kysely<DB>, candidateId: number, personId: number): Promise<void> {
  await db
    .updateTable('candidate')
    .set((e) => ({ grades_given: e('grades_given', '+', 1) }))
    .where('id', '=', candidateId)
    .execute()
  await db.deleteFrom('lease').where('candidate_id', '=', candidateId).where('person_id', '=', personId).execute()
}

/** Live leases of a candidate: whether the person holds one, and how many others do. */
export async function countLiveLeases(
  db: Kysely<DB>,
  candidateId: number,
  personId: number,
  now: string,
): Promise<{ own: number; others: number }> {
  return db
    .selectFrom('lease')
    .select((e) => [
      e.fn.countAll<number>().filterWhere('person_id', '=', personId).as('own'),
      e.fn.countAll<number>().filterWhere('person_id', '!=', personId).as('others'),
    ])
    .where('candidate_id', '=', candidateId)
    .where('until', '>', now)
    .executeTakeFirstOrThrow()
}

/** Notes, once for each, that the person has been shown the judgement of these candidates. */
export async function insertJudgementsShown(
  db: Kysely<DB>,
  shown: { campaignId: number; personId: number; candidateIds: readonly number[]; now: string },
): Promise<void> {
  await sql`
    insert or ignore into judgement_shown (campaign_id, candidate_id, person_id, at)
    select ${shown.campaignId}, value, ${shown.personId}, ${shown.now}
    from json_each(${JSON.stringify(shown.candidateIds)})`.execute(db)
}

export async function isJudgementShown(db: Kysely<DB>, candidateId: number, personId: number): Promise<boolean> {
  const row = await db
    .selectFrom('judgement_shown')
    .select('at')
    .where('person_id', '=', personId)
    .where('candidate_id', '=', candidateId)
    .executeTakeFirst()
  return row !== undefined
}

export interface RunPace {
  ruleId: number
  newestGradeId: number
  /** How many grades the run counted. */
  grades: number
  at: IsoTime
}

/** When the campaign's newest run was, and how much it read. */
export async function findRunPace(db: Kysely<DB>, campaignId: number): Promise<RunPace | null> {
  const row = await db
    .selectFrom('run')
    .select(['rule_id as ruleId', 'newest_grade_id as newestGradeId', 'created_at as at'])
    .select(sql<number>`coalesce(summary ->> 'grades', 0)`.as('grades'))
    .where('campaign_id', '=', campaignId)
    .orderBy('id', 'desc')
    .limit(1)
    .executeTakeFirst()
  return row ?? null
}

/**
 * Whether any imaged candidate has fewer looks than wanted, or where looks end with settling, one of any worth. What a ruling has
 * decided counts as wanting, calibration stamps do not: nothing is judged of them. A walk in an index past the stamps.
 */
export async function wantsAnyLook(
  db: Kysely<DB>,
  campaignId: number,
  gradesWanted: number,
  untilSettled: boolean,
): Promise<boolean> {
  const row = await db
    .selectFrom('candidate')
    .select('id')
    .where('campaign_id', '=', campaignId)
    .where('imaged_at', 'is not', null)
    .where('truth', 'is', null)
    .where(untilSettled ? sql<SqlBool>`settled = 0 and look_value > 0` : sql<SqlBool>`grades_given < ${gradesWanted}`)
    .limit(1)
    .executeTakeFirst()
  return row !== undefined
}
