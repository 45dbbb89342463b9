import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'
import type { GradeLetter, GradeRow } from '../schema/grading'
import type { CandidateState } from '../schema/intake'
import type { Role } from '../schema/people'
import type { IsoTime } from '../schema/values'

export interface EverGrader {
  personId: number
  name: string
  pseudonym: string
  role: Role
  endedAt: IsoTime | null
}

/** Everybody who is or was in the campaign and has graded in it, in the order in which they came. */
export async function listEverGraders(db: Kysely<DB>, campaignId: number): Promise<EverGrader[]> {
  return db
    .selectFrom('membership')
    .innerJoin('person', 'person.id', 'membership.person_id')
    .select([
      'membership.person_id as personId',
      'person.name',
      'membership.pseudonym',
      'membership.role',
      'membership.ended_at as endedAt',
    ])
    .where('membership.campaign_id', '=', campaignId)
    .where((e) =>
      e.exists(
        e
          .selectFrom('grade')
          .select('grade.id')
          .whereRef('grade.campaign_id', '=', 'membership.campaign_id')
          .whereRef('grade.person_id', '=', 'membership.person_id'),
      ),
    )
    .orderBy('membership.id')
    .execute()
}

export interface GradeOfPerson {
  id: number
  candidateId: number
  occasion: GradeRow['occasion']
  grade: GradeLetter
  replaces: number | null
  seconds: number | null
  givenAt: IsoTime
}

/** A page of a person's grades of the campaign, corrected ones too, in order of their ids. */
export async function listGradesOfPerson(
  db: Kysely<DB>,
  page: { campaignId: number; personId: number; after: number; upTo: number; limit: number },
): Promise<GradeOfPerson[]> {
  return db
    .selectFrom('grade')
    .select(['id', 'candidate_id as candidateId', 'occasion', 'grade', 'replaces', 'seconds', 'given_at as givenAt'])
    .where('campaign_id', '=', page.campaignId)
    .where('person_id', '=', page.personId)
    .where('id', '>', page.after)
    .where('id', '<=', page.upTo)
    .orderBy('id')
    .limit(page.limit)
    .execute()
}

export interface CandidateOfReport {
  id: number
  truth: 'lens' | 'not a lens' | null
  score: number | null
  state: CandidateState
  imaged: 0 | 1
  settled: 0 | 1
  given: number
  asked: number
  /** A ruling stands that confirms it or sets it aside. */
  ruled: 0 | 1
  /** Where it is in the first pass; 'sent on' where the campaign makes none. */
  pass: 'waiting' | 'sent on' | 'dropped'
}

export async function listCandidatesOfReport(
  db: Kysely<DB>,
  page: { campaignId: number; after: number; limit: number },
): Promise<CandidateOfReport[]> {
  return (
    db
      .selectFrom('candidate')
      .innerJoin('campaign', 'campaign.id', 'candidate.campaign_id')
      .leftJoin('ruling', 'ruling.id', 'candidate.ruling_id')
      .select([
        'candidate.id',
        'candidate.truth',
        'candidate.score',
        'candidate.state',
        'candidate.settled',
        'candidate.grades_given as given',
        'candidate.looks_asked as asked',
      ])
      .select([
        sql<0 | 1>`candidate.imaged_at is not null`.as('imaged'),
        sql<
          CandidateOfReport['pass']
        >`case when campaign.uses_sheet = 1 then candidate.first_pass else 'sent on' end`.as('pass'),
        sql<0 | 1>`coalesce(ruling.outcome in ('confirmed', 'set aside'), 0)`.as('ruled'),
      ])
      .where('candidate.id', '>', page.after)
      // The plus keeps SQLite on the primary key: by an index on the campaign it would sort the whole campaign for each page.
      .where(sql<boolean>`+candidate.campaign_id = ${page.campaignId}`)
      .orderBy('candidate.id')
      .limit(page.limit)
      .execute()
  )
}

/** What a report was made of: while none of it changes, neither does the report, but for the clock. */
export interface ReportInput {
  newestGradeId: number
  newestLeftOutId: number
  newestRunId: number
  newestRuleId: number
  newestRulingId: number
  newestCandidateId: number
  newestSheetMarkId: number
  usesSheet: 0 | 1
}

export async function newestReportInput(db: Kysely<DB>, campaignId: number): Promise<ReportInput> {
  const of = (table: string) =>
    sql<number>`(select coalesce(max(id), 0) from ${sql.table(table)} where campaign_id = ${campaignId})`
  const { rows } = await sql<ReportInput>`select
    (select coalesce(max(newest), 0) from (
      select (select max(g.id) from grade g where g.campaign_id = m.campaign_id and g.person_id = m.person_id) as newest
      from membership m where m.campaign_id = ${campaignId})) as newestGradeId,
    ${of('left_out')} as newestLeftOutId,
    ${of('run')} as newestRunId,
    ${of('rule')} as newestRuleId,
    (select coalesce(max(id), 0) from ruling) as newestRulingId,
    ${of('candidate')} as newestCandidateId,
    ${of('sheet_mark')} as newestSheetMarkId,
    (select uses_sheet from campaign where id = ${campaignId}) as usesSheet`.execute(db)
  return rows[0]
}

export interface HeldCandidates {
  personId: number
  candidates: number
  /** Their newest grade in the campaign; null for none. */
  lastGradeAt: IsoTime | null
}

/** Who holds candidates now, and when they last graded. */
export async function listHeldCandidates(db: Kysely<DB>, campaignId: number, now: IsoTime): Promise<HeldCandidates[]> {
  return db
    .selectFrom('lease')
    .select('person_id as personId')
    .select((e) => e.fn.countAll<number>().as('candidates'))
    .select((e) =>
      e
        .selectFrom('grade')
        .select('given_at')
        .where('grade.campaign_id', '=', campaignId)
        .whereRef('grade.person_id', '=', 'lease.person_id')
        .orderBy('grade.id', 'desc')
        .limit(1)
        .as('lastGradeAt'),
    )
    .where('campaign_id', '=', campaignId)
    .where('until', '>', now)
    .groupBy('person_id')
    .orderBy('person_id')
    .execute()
}
