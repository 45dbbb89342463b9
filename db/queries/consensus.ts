import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'
import type { Rule } from '../schema/campaigns'
import type { Run, RunModel, RunSummary } from '../schema/consensus'
import type { GradeLetter } from '../schema/grading'
import type { CandidateState } from '../schema/intake'
import { toJson, type IsoTime } from '../schema/values'
import { inCampaign } from './by-ids'
import { newestMarkId } from './sheet'

/**
 * The answers that count for a verdict: of each person and candidate the newest standing one, given first or asked for.
 * Repeats measure a grader's constancy and decide nothing. A correction is always newer than what it corrects, so the newest
 * row is a standing one. With `upTo` they are the answers as they stood when that row was the newest grade: grades only grow.
 */
export function countedAnswers(db: Kysely<DB>, upTo?: number) {
  const base = db
    .selectFrom('grade')
    .where('grade.occasion', 'in', ['first', 'asked'])
    .where(({ not, exists, selectFrom }) => {
      const newer = selectFrom('grade as newer')
        .select('newer.id')
        .whereRef('newer.candidate_id', '=', 'grade.candidate_id')
        .whereRef('newer.person_id', '=', 'grade.person_id')
        .where('newer.occasion', 'in', ['first', 'asked'])
        .whereRef('newer.id', '>', 'grade.id')
      return not(exists(upTo === undefined ? newer : newer.where('newer.id', '<=', upTo)))
    })
  return upTo === undefined ? base : base.where('grade.id', '<=', upTo)
}

export interface CountedAnswer {
  id: number
  candidateId: number
  personId: number
  grade: GradeLetter
}

/** Counted answers of candidates `from` to `to`, in order of candidate and person. */
export async function listCountedAnswers(
  db: Kysely<DB>,
  range: { campaignId: number; from: number; to: number; upTo: number },
): Promise<CountedAnswer[]> {
  return countedAnswers(db, range.upTo)
    .select(['grade.id', 'grade.candidate_id as candidateId', 'grade.person_id as personId', 'grade.grade'])
    .where('grade.candidate_id', '>=', range.from)
    .where('grade.candidate_id', '<=', range.to)
    .where(sql<boolean>`+grade.campaign_id = ${range.campaignId}`)
    .orderBy('grade.candidate_id')
    .orderBy('grade.person_id')
    .execute()
}

/** The newest rows of a moment: together with a rule they fix what a run reads. */
export interface RunBounds {
  newestGradeId: number
  newestCandidateId: number
  newestLeftOutId: number
  /** Of the first pass; 0 where the campaign uses no sheet. */
  newestSheetMarkId?: number
}

export async function newestInput(db: Kysely<DB>, campaignId: number): Promise<RunBounds> {
  const grade = await db
    .selectFrom('grade')
    .select((e) => e.fn.max('id').as('id'))
    .executeTakeFirst()
  const candidate = await db
    .selectFrom('candidate')
    .select((e) => e.fn.max('id').as('id'))
    .where('campaign_id', '=', campaignId)
    .executeTakeFirst()
  const leftOut = await db
    .selectFrom('left_out')
    .select((e) => e.fn.max('id').as('id'))
    .where('campaign_id', '=', campaignId)
    .executeTakeFirst()
  return {
    newestGradeId: grade?.id ?? 0,
    newestCandidateId: candidate?.id ?? 0,
    newestLeftOutId: leftOut?.id ?? 0,
    newestSheetMarkId: await newestMarkId(db, campaignId),
  }
}

/** Whose grades do not count, as it stood when that decision was the newest; in order of person. */
export async function listLeftOutPeople(db: Kysely<DB>, campaignId: number, upTo: number): Promise<number[]> {
  const rows = await db
    .selectFrom('left_out')
    .select('person_id as personId')
    .where('campaign_id', '=', campaignId)
    .where('left_out', '=', 1)
    .where('id', 'in', (e) =>
      e
        .selectFrom('left_out as newest')
        .select((n) => n.fn.max('newest.id').as('id'))
        .where('newest.campaign_id', '=', campaignId)
        .where('newest.id', '<=', upTo)
        .groupBy('newest.person_id'),
    )
    .orderBy('person_id')
    .execute()
  return rows.map((row) => row.personId)
}

/** Pseudonyms of everybody who is or was a member. They never change. */
export async function listPseudonyms(db: Kysely<DB>, campaignId: number): Promise<Map<number, string>> {
  const rows = await db
    .selectFrom('membership')
    .select(['person_id as personId', 'pseudonym'])
    .where('campaign_id', '=', campaignId)
    .execute()
  return new Map(rows.map((row) => [row.personId, row.pseudonym]))
}

export interface CandidateOfRun {
  id: number
  truth: 'lens' | 'not a lens' | null
}

/** A page of a campaign's candidates by id. */
export async function listCandidatesOfRun(
  db: Kysely<DB>,
  page: { campaignId: number; after: number; upTo: number; limit: number; withCalibration: boolean },
): Promise<CandidateOfRun[]> {
  return db
    .selectFrom('candidate')
    .select(['id', 'truth'])
    .where('id', '>', page.after)
    .where('id', '<=', page.upTo)
    .where(inCampaign('campaign_id', page.campaignId))
    .$if(!page.withCalibration, (query) => query.where('truth', 'is', null))
    .orderBy('id')
    .limit(page.limit)
    .execute()
}

export interface CandidateWithVerdict {
  id: number
  outcome: CandidateState | null
  grades: number | null
  cannotJudge: number | null
  mean: number | null
  spread: number | null
  probability: number | null
  reason: string | null
  /** Of the run that gave the verdict. */
  ruleId: number | null
  newestGradeId: number | null
}

/** A page of a campaign's candidates with their newest verdicts, by id; calibration candidates left out. */
export async function listCandidatesWithVerdict(
  db: Kysely<DB>,
  page: { campaignId: number; after: number; upTo: number; limit: number },
): Promise<CandidateWithVerdict[]> {
  return (
    db
      .selectFrom('candidate')
      .leftJoin('verdict', 'verdict.id', 'candidate.verdict_id')
      .leftJoin('run', 'run.id', 'verdict.run_id')
      .select([
        'candidate.id',
        'verdict.outcome',
        'verdict.grades',
        'verdict.cannot_judge as cannotJudge',
        'verdict.mean',
        'verdict.spread',
        'verdict.probability',
        'verdict.reason',
        'run.rule_id as ruleId',
        'run.newest_grade_id as newestGradeId',
      ])
      .where('candidate.id', '>', page.after)
      .where('candidate.id', '<=', page.upTo)
      // The plus keeps SQLite on the primary key: by an index on the campaign it would sort the whole campaign for each page.
      .where(sql<boolean>`+candidate.campaign_id = ${page.campaignId}`)
      .where('candidate.truth', 'is', null)
      .orderBy('candidate.id')
      .limit(page.limit)
      .execute()
  )
}

export async function findNewestRun(db: Kysely<DB>, campaignId: number): Promise<Run | null> {
  const run = await db
    .selectFrom('run')
    .selectAll()
    .where('campaign_id', '=', campaignId)
    .orderBy('id', 'desc')
    .limit(1)
    .executeTakeFirst()
  return run ?? null
}

export async function findRuleOfRun(db: Kysely<DB>, runId: number): Promise<Rule> {
  return db
    .selectFrom('run')
    .innerJoin('rule', 'rule.id', 'run.rule_id')
    .selectAll('rule')
    .where('run.id', '=', runId)
    .executeTakeFirstOrThrow()
}

export async function insertRun(
  db: Kysely<DB>,
  run: {
    campaignId: number
    ruleId: number
    inputDigest: string
    newestGradeId: number
    newestCandidateId: number
    newestLeftOutId?: number
    newestSheetMarkId?: number
    summary: RunSummary
    model?: RunModel | null
    startedBy: number | null
    now: IsoTime
  },
): Promise<Run> {
  return db
    .insertInto('run')
    .values({
      campaign_id: run.campaignId,
      rule_id: run.ruleId,
      input_digest: run.inputDigest,
      newest_grade_id: run.newestGradeId,
      newest_candidate_id: run.newestCandidateId,
      newest_left_out_id: run.newestLeftOutId ?? 0,
      newest_sheet_mark_id: run.newestSheetMarkId ?? 0,
      summary: toJson(run.summary),
      model: run.model ? toJson(run.model) : null,
      started_by: run.startedBy,
      created_at: run.now,
    })
    .returningAll()
    .executeTakeFirstOrThrow()
}

export interface NewVerdict {
  candidateId: number
  outcome: CandidateState
  grades: number
  cannotJudge: number
  mean: number | null
  spread: number | null
  /** of a lens, by the reliability method */
  probability: number | null
  reason: string
}

/** Appends the verdicts and makes them the newest of their candidates. Returns their ids by candidate. */
export async function insertVerdicts(
  db: Kysely<DB>,
  runId: number,
  verdicts: readonly NewVerdict[],
): Promise<Map<number, number>> {
  if (verdicts.length === 0) return new Map()
  const rows = await db
    .insertInto('verdict')
    .values(
      verdicts.map((verdict) => ({
        run_id: runId,
        candidate_id: verdict.candidateId,
        outcome: verdict.outcome,
        grades: verdict.grades,
        cannot_judge: verdict.cannotJudge,
        mean: verdict.mean,
        spread: verdict.spread,
        probability: verdict.probability,
        reason: verdict.reason,
      })),
    )
    .returning(['id', 'candidate_id'])
    .execute()
  const ids = rows.map((row) => row.id)
  await db
    .updateTable('candidate')
    .from('verdict')
    .set((e) => ({ verdict_id: e.ref('verdict.id') }))
    .whereRef('verdict.candidate_id', '=', 'candidate.id')
    .where('verdict.id', '>=', Math.min(...ids))
    .where('verdict.id', '<=', Math.max(...ids))
    .where('verdict.run_id', '=', runId)
    .execute()
  return new Map(rows.map((row) => [row.candidate_id, row.id]))
}
