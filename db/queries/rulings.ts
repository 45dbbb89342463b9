import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'
import type { Estimate, Ruling, RulingOutcome, RunModel, StateChange } from '../schema/consensus'
import type { CandidateState } from '../schema/intake'
import type { IsoTime, Json } from '../schema/values'

export interface RulingWithName extends Ruling {
  name: string
  pseudonym: string | null
}

/** Every ruling on a candidate, newest first. */
export async function listRulingsOf(db: Kysely<DB>, candidateId: number): Promise<RulingWithName[]> {
  return db
    .selectFrom('ruling')
    .innerJoin('candidate', 'candidate.id', 'ruling.candidate_id')
    .innerJoin('person', 'person.id', 'ruling.person_id')
    .leftJoin('membership', (join) =>
      join
        .onRef('membership.person_id', '=', 'ruling.person_id')
        .onRef('membership.campaign_id', '=', 'candidate.campaign_id'),
    )
    .selectAll('ruling')
    .select(['person.name', 'membership.pseudonym'])
    .where('ruling.candidate_id', '=', candidateId)
    .orderBy('ruling.id', 'desc')
    .execute()
}

export async function findRuling(db: Kysely<DB>, rulingId: number): Promise<Ruling | null> {
  return (await db.selectFrom('ruling').selectAll().where('id', '=', rulingId).executeTakeFirst()) ?? null
}

/** The candidate's newest ruling, unless it handed the candidate back to the verdict. */
export async function findStandingRuling(db: Kysely<DB>, candidateId: number): Promise<Ruling | null> {
  const row = await db
    .selectFrom('candidate')
    .innerJoin('ruling', 'ruling.id', 'candidate.ruling_id')
    .selectAll('ruling')
    .where('candidate.id', '=', candidateId)
    .where('ruling.outcome', '!=', 'by verdict')
    .executeTakeFirst()
  return row ?? null
}

/** The run that gave a verdict, with the model and the newest grade that it read. */
export async function findRunOfVerdict(
  db: Kysely<DB>,
  verdictId: number,
): Promise<{ id: number; model: Json<RunModel> | null; newestGradeId: number } | null> {
  const row = await db
    .selectFrom('verdict')
    .innerJoin('run', 'run.id', 'verdict.run_id')
    .select(['run.id', 'run.model', 'run.newest_grade_id as newestGradeId'])
    .where('verdict.id', '=', verdictId)
    .executeTakeFirst()
  return row ?? null
}

/** What the candidate's grades come to under the last run's reliabilities. */
export async function findEstimateOf(db: Kysely<DB>, candidateId: number): Promise<Estimate | null> {
  const row = await db.selectFrom('estimate').selectAll().where('candidate_id', '=', candidateId).executeTakeFirst()
  return row ?? null
}

/** Appends the ruling and makes it the candidate's newest, with the looks that are asked for from now. */
export async function insertRuling(
  db: Kysely<DB>,
  ruling: {
    candidateId: number
    personId: number
    outcome: RulingOutcome
    grade: 'A' | 'B' | 'C' | null
    reason: string
    looksAsked: number
    now: IsoTime
  },
): Promise<number> {
  const { id } = await db
    .insertInto('ruling')
    .values({
      candidate_id: ruling.candidateId,
      person_id: ruling.personId,
      outcome: ruling.outcome,
      grade: ruling.grade,
      reason: ruling.reason,
      created_at: ruling.now,
    })
    .returning('id')
    .executeTakeFirstOrThrow()
  await db
    .updateTable('candidate')
    .set({ ruling_id: id, looks_asked: ruling.looksAsked })
    .where('id', '=', ruling.candidateId)
    .execute()
  return id
}

/** Every change of a candidate's state, oldest first. */
export async function listStateChanges(db: Kysely<DB>, candidateId: number): Promise<StateChange[]> {
  return db.selectFrom('state_change').selectAll().where('candidate_id', '=', candidateId).orderBy('id').execute()
}

export interface SplitRow {
  id: number
  name: string
  mean: number | null
  spread: number | null
  /** of a lens, by the live estimate; null by the mean */
  probability: number | null
  grades: number | null
  since: IsoTime
  lastRulingId: number | null
}

export interface SplitOrdering {
  by: 'worth' | 'mean' | 'spread' | 'waiting' | 'name'
  /** Thresholds by which worth is reckoned under the mean method; null: by the probability of a lens. */
  thresholds: { confirmMean: number; setAsideMean: number } | null
}

/**
 * A campaign's splits. By worth: those whose probability of a lens is nearest to a half first, which have the most entropy; by the
 * mean method those whose mean lies deepest between the thresholds, then the widest spread. Without a grade they come last.
 */
export async function listSplits(
  db: Kysely<DB>,
  campaignId: number,
  { by, thresholds }: SplitOrdering,
  limit: number,
): Promise<SplitRow[]> {
  const splits = db
    .selectFrom('candidate')
    .leftJoin('verdict', 'verdict.id', 'candidate.verdict_id')
    .leftJoin('estimate', 'estimate.candidate_id', 'candidate.id')
    .select([
      'candidate.id',
      'candidate.name',
      'candidate.state_since as since',
      'candidate.ruling_id as lastRulingId',
      'verdict.mean',
      'verdict.spread',
      'verdict.grades',
    ])
    .select(
      sql<number | null>`${thresholds ? null : sql`coalesce(estimate.probability, verdict.probability)`}`.as(
        'probability',
      ),
    )
    .where('candidate.campaign_id', '=', campaignId)
    .where('candidate.state', '=', 'split')
    .limit(limit)
  switch (by) {
    case 'worth':
      return splits
        .orderBy(
          thresholds
            ? sql`min(verdict.mean - ${thresholds.setAsideMean}, ${thresholds.confirmMean} - verdict.mean)`
            : sql`-abs(coalesce(estimate.probability, verdict.probability) - 0.5)`,
          (order) => order.desc().nullsLast(),
        )
        .orderBy('verdict.spread', 'desc')
        .orderBy('candidate.id')
        .execute()
    case 'mean':
      return splits
        .orderBy('verdict.mean', (order) => order.desc().nullsLast())
        .orderBy('verdict.spread', 'desc')
        .orderBy('candidate.id')
        .execute()
    case 'spread':
      return splits
        .orderBy('verdict.spread', (order) => order.desc().nullsLast())
        .orderBy('candidate.id')
        .execute()
    case 'waiting':
      return splits.orderBy('candidate.state_since').orderBy('candidate.id').execute()
    case 'name':
      return splits.orderBy('candidate.name').orderBy('candidate.id').execute()
  }
}

export interface RecentRuling {
  candidateId: number
  name: string
  outcome: RulingOutcome
  grade: 'A' | 'B' | 'C' | null
  state: CandidateState
  by: string
  at: IsoTime
}

/** The candidates that were ruled on last, each once with its newest ruling, newest first. */
export async function listRecentRulings(db: Kysely<DB>, campaignId: number, limit: number): Promise<RecentRuling[]> {
  return db
    .selectFrom('candidate')
    .innerJoin('ruling', 'ruling.id', 'candidate.ruling_id')
    .innerJoin('person', 'person.id', 'ruling.person_id')
    .select([
      'candidate.id as candidateId',
      'candidate.name',
      'candidate.state',
      'ruling.outcome',
      'ruling.grade',
      'person.name as by',
      'ruling.created_at as at',
    ])
    .where('candidate.campaign_id', '=', campaignId)
    .orderBy('candidate.ruling_id', 'desc')
    .limit(limit)
    .execute()
}
