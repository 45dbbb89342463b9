import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'
import type { RunModel } from '../schema/consensus'
import type { GradeLetter } from '../schema/grading'
import type { CandidateState } from '../schema/intake'
import type { Json } from '../schema/values'
import { inCampaign } from './by-ids'

export interface StoredModel {
  runId: number
  ruleId: number
  inputDigest: string
}

/** The campaign's newest run, if it fitted a model. */
export async function findNewestModel(db: Kysely<DB>, campaignId: number): Promise<StoredModel | null> {
  const row = await db
    .selectFrom('run')
    .select(['id as runId', 'rule_id as ruleId', 'input_digest as inputDigest'])
    .select(sql<0 | 1>`model is not null`.as('fitted'))
    .where('campaign_id', '=', campaignId)
    .orderBy('id', 'desc')
    .limit(1)
    .executeTakeFirst()
  return row?.fitted ? row : null
}

export async function findModel(db: Kysely<DB>, runId: number): Promise<Json<RunModel> | null> {
  const row = await db.selectFrom('run').select('model').where('id', '=', runId).executeTakeFirst()
  return row?.model ?? null
}

export interface StandingAnswer {
  id: number
  candidateId: number
  personId: number
  grade: GradeLetter
}

/** Of each person and candidate the newest answer given first or asked for, of candidates `from` to `to`, in order of candidate. */
export async function listStandingAnswers(
  db: Kysely<DB>,
  campaignId: number,
  from: number,
  to: number,
): Promise<StandingAnswer[]> {
  return db
    .selectFrom('grade')
    .select(['grade.id', 'grade.candidate_id as candidateId', 'grade.person_id as personId', 'grade.grade'])
    .where('grade.candidate_id', '>=', from)
    .where('grade.candidate_id', '<=', to)
    .where(inCampaign('grade.campaign_id', campaignId))
    .where('grade.occasion', 'in', ['first', 'asked'])
    .where(({ not, exists, selectFrom }) =>
      not(
        exists(
          selectFrom('grade as newer')
            .select('newer.id')
            .whereRef('newer.candidate_id', '=', 'grade.candidate_id')
            .whereRef('newer.person_id', '=', 'grade.person_id')
            .where('newer.occasion', 'in', ['first', 'asked'])
            .whereRef('newer.id', '>', 'grade.id'),
        ),
      ),
    )
    .orderBy('grade.candidate_id')
    .execute()
}

/** What stands of a candidate; null where nothing does. */
export interface StandingEstimate {
  runId: number | null
  newestGradeId: number | null
  grades: number | null
  cannotJudge: number | null
  evidence: number | null
  probability: number | null
  outcome: CandidateState | null
}

export interface CandidateToEstimate extends StandingEstimate {
  id: number
  calibration: 0 | 1
  looksGiven: number
  settled: 0 | 1
  lookValue: number
}

function toEstimate(db: Kysely<DB>) {
  return db
    .selectFrom('candidate')
    .leftJoin('estimate', 'estimate.candidate_id', 'candidate.id')
    .select([
      'candidate.id',
      'candidate.grades_given as looksGiven',
      'candidate.settled',
      'candidate.look_value as lookValue',
      'estimate.run_id as runId',
      'estimate.newest_grade_id as newestGradeId',
      'estimate.grades',
      'estimate.cannot_judge as cannotJudge',
      'estimate.evidence',
      'estimate.probability',
      'estimate.outcome',
    ])
    .select(sql<0 | 1>`candidate.truth is not null`.as('calibration'))
}

/** A page of the campaign's candidates by id, calibration stamps among them. */
export async function listToEstimate(
  db: Kysely<DB>,
  page: { campaignId: number; after: number; limit: number },
): Promise<CandidateToEstimate[]> {
  return toEstimate(db)
    .where('candidate.id', '>', page.after)
    .where(inCampaign('candidate.campaign_id', page.campaignId))
    .orderBy('candidate.id')
    .limit(page.limit)
    .execute()
}

export async function findToEstimate(db: Kysely<DB>, candidateId: number): Promise<CandidateToEstimate | null> {
  return (await toEstimate(db).where('candidate.id', '=', candidateId).executeTakeFirst()) ?? null
}

export interface NewEstimate {
  candidateId: number
  runId: number
  newestGradeId: number
  grades: number
  cannotJudge: number
  evidence: number
  probability: number
  outcome: CandidateState
}

export async function upsertEstimates(db: Kysely<DB>, estimates: readonly NewEstimate[]): Promise<void> {
  if (estimates.length === 0) return
  await db
    .insertInto('estimate')
    .values(
      estimates.map((estimate) => ({
        candidate_id: estimate.candidateId,
        run_id: estimate.runId,
        newest_grade_id: estimate.newestGradeId,
        grades: estimate.grades,
        cannot_judge: estimate.cannotJudge,
        evidence: estimate.evidence,
        probability: estimate.probability,
        outcome: estimate.outcome,
      })),
    )
    .onConflict((conflict) =>
      conflict.column('candidate_id').doUpdateSet((e) => ({
        run_id: e.ref('excluded.run_id'),
        newest_grade_id: e.ref('excluded.newest_grade_id'),
        grades: e.ref('excluded.grades'),
        cannot_judge: e.ref('excluded.cannot_judge'),
        evidence: e.ref('excluded.evidence'),
        probability: e.ref('excluded.probability'),
        outcome: e.ref('excluded.outcome'),
      })),
    )
    .execute()
}

export interface Want {
  id: number
  settled: 0 | 1
  lookValue: number
}

/** What the queue goes by. */
export async function setWants(db: Kysely<DB>, wants: readonly Want[]): Promise<void> {
  if (wants.length === 0) return
  await sql`
    update candidate set settled = w.value ->> 1, look_value = w.value ->> 2
    from json_each(${JSON.stringify(wants.map(({ id, settled, lookValue }) => [id, settled, lookValue]))}) w
    where candidate.id = w.value ->> 0`.execute(db)
}

/** Whether any candidate of the campaign has an estimate. */
export async function hasEstimates(db: Kysely<DB>, campaignId: number): Promise<boolean> {
  const row = await db
    .selectFrom('run')
    .innerJoin('estimate', 'estimate.run_id', 'run.id')
    .select('estimate.candidate_id')
    .where('run.campaign_id', '=', campaignId)
    .limit(1)
    .executeTakeFirst()
  return row !== undefined
}

export async function deleteEstimates(db: Kysely<DB>, candidateIds: readonly number[]): Promise<void> {
  if (candidateIds.length === 0) return
  await sql`delete from estimate where candidate_id in (select value from json_each(${JSON.stringify(candidateIds)}))`.execute(
    db,
  )
}
