import { sql, type Kysely, type RawBuilder, type SqlBool } from 'kysely'
import type { DB } from '../schema'
import type { CandidateState } from '../schema/intake'
import { among, inCampaign } from './by-ids'
import { isOwnJudgement } from './grading'

/** Which candidates of a campaign a list may draw on, and of which of them it may use what people judged. */
export interface CandidateScope {
  campaignId: number
  withCalibration: boolean
  /** null: every verdict is open to the reader. Else only those of candidates that this person has judged. */
  judgedBy: number | null
}

export interface CandidateRow {
  id: number
  name: string
  raDeg: number | null
  decDeg: number | null
  score: number | null
  calibration: 0 | 1
  state: CandidateState
  designation: string | null
  outcome: CandidateState | null
  grades: number | null
  cannotJudge: number | null
  mean: number | null
  spread: number | null
  probability: number | null
  reason: string | null
}

/**
 * Whether the reader may see what was judged of this candidate. A list made once costs what the reader has graded, not what the
 * campaign holds: hence the index of the reader's grades, and not that of the candidate's.
 */
function isRevealed({ campaignId, judgedBy }: CandidateScope): RawBuilder<SqlBool> {
  if (judgedBy === null) return sql<SqlBool>`true`
  return sql<SqlBool>`candidate.id in (select own.candidate_id from grade own indexed by grade_person
    where own.campaign_id = ${campaignId} and own.person_id = ${judgedBy} and ${isOwnJudgement(judgedBy)})`
}

function candidates(db: Kysely<DB>, scope: CandidateScope) {
  return db
    .selectFrom('candidate')
    .where('candidate.campaign_id', '=', scope.campaignId)
    .$if(!scope.withCalibration, (query) => query.where('candidate.truth', 'is', null))
}

/** For each candidate the columns that a list shows, still without saying which candidates. */
function candidateRows(db: Kysely<DB>) {
  return db
    .selectFrom('candidate')
    .leftJoin('verdict', 'verdict.id', 'candidate.verdict_id')
    .leftJoin('designation', 'designation.candidate_id', 'candidate.id')
    .select([
      'candidate.id',
      'candidate.name',
      'candidate.ra_deg as raDeg',
      'candidate.dec_deg as decDeg',
      'candidate.score',
      'candidate.state',
      'designation.designation',
      'verdict.outcome',
      'verdict.grades',
      'verdict.cannot_judge as cannotJudge',
      'verdict.mean',
      'verdict.spread',
      'verdict.probability',
      'verdict.reason',
    ])
    .select(sql<0 | 1>`candidate.truth is not null`.as('calibration'))
}

/** In the order of their ids, from after `afterId`. A state is looked for only among candidates whose state may be seen. */
export async function listCandidatesAfter(
  db: Kysely<DB>,
  scope: CandidateScope,
  page: { afterId: number; limit: number; state?: CandidateState },
): Promise<CandidateRow[]> {
  const { state } = page
  const ids = candidates(db, scope)
    .select('candidate.id')
    .where('candidate.id', '>', page.afterId)
    .$if(state !== undefined, (query) => query.where('candidate.state', '=', state!).where(isRevealed(scope)))
    .orderBy('candidate.id')
    .limit(page.limit)
  return candidateRows(db).where('candidate.id', 'in', ids).orderBy('candidate.id').execute()
}

export const CANDIDATE_ORDERS = [
  'id',
  'name',
  'raDeg',
  'decDeg',
  'state',
  'mean',
  'spread',
  'probability',
  'score',
] as const
export type CandidateOrder = (typeof CANDIDATE_ORDERS)[number]

const ORDER_COLUMN: Record<CandidateOrder, RawBuilder<unknown>> = {
  id: sql`candidate.id`,
  name: sql`candidate.name`,
  raDeg: sql`candidate.ra_deg`,
  decDeg: sql`candidate.dec_deg`,
  score: sql`candidate.score`,
  mean: sql`verdict.mean`,
  spread: sql`verdict.spread`,
  probability: sql`verdict.probability`,
  // In the order of a candidate's life.
  state: sql`case candidate.state when 'open' then 0 when 'split' then 1 when 'confirmed' then 2 else 3 end`,
}

const VERDICT_ORDERS: readonly CandidateOrder[] = ['mean', 'spread', 'probability']
const JUDGED_ORDERS: readonly CandidateOrder[] = [...VERDICT_ORDERS, 'state']

export interface CandidateFilter {
  states?: readonly CandidateState[]
  /** Candidates whose state the reader may not see yet. */
  withheld?: boolean
  /** What the first pass has not sent on. */
  notSentOn?: boolean
  /** Part of the name, without regard to case. */
  name?: string
  calibration?: boolean
}

function filtered(db: Kysely<DB>, scope: CandidateScope, filter: CandidateFilter) {
  const { states = [], withheld = false, notSentOn = false, name, calibration } = filter
  const pattern = `%${(name ?? '').replace(/[\\%_]/g, '\\$&')}%`
  return candidates(db, scope)
    .$if(states.length > 0 || withheld || notSentOn, (query) =>
      query.where((e) =>
        e.or([
          ...(states.length ? [e.and([e('candidate.state', 'in', [...states]), isRevealed(scope)])] : []),
          ...(withheld ? [e.not(isRevealed(scope))] : []),
          ...(notSentOn ? [e.and([e('candidate.first_pass', '=', 'dropped'), e('candidate.truth', 'is', null)])] : []),
        ]),
      ),
    )
    .$if(Boolean(name), (query) => query.where(sql<SqlBool>`candidate.name like ${pattern} escape '\\'`))
    .$if(calibration !== undefined, (query) => query.where('candidate.truth', calibration ? 'is not' : 'is', null))
}

/**
 * One slice of the candidates, sorted; what is unknown comes last either way. Only the ids are sorted, and the rows of the
 * slice read afterwards, so that 100,000 candidates stay quick.
 */
export async function listCandidateSlice(
  db: Kysely<DB>,
  scope: CandidateScope,
  slice: { filter: CandidateFilter; order: CandidateOrder; descending: boolean; offset: number; limit: number },
): Promise<CandidateRow[]> {
  const { order, descending } = slice
  const column = ORDER_COLUMN[order]
  const judged = JUDGED_ORDERS.includes(order) && scope.judgedBy !== null
  // Where a value is withheld, its place in the order must not give it away. A grader is told no verdict that leaves it open.
  const told = VERDICT_ORDERS.includes(order) ? sql<SqlBool>`verdict.outcome <> 'open'` : sql<SqlBool>`true`
  const key = judged ? sql`case when ${isRevealed(scope)} and ${told} then ${column} end` : column
  const ids = await filtered(db, scope, slice.filter)
    .select('candidate.id')
    .$if(VERDICT_ORDERS.includes(order), (query) =>
      query.leftJoin('verdict', (join) =>
        join
          .onRef('verdict.candidate_id', '=', 'candidate.id')
          // The plus lets SQLite find it in the index of candidates, which holds mean and spread, and not in the table.
          .on(sql<SqlBool>`+verdict.id = candidate.verdict_id`),
      ),
    )
    .$if(order !== 'id', (query) => query.orderBy(key, (by) => (descending ? by.desc() : by.asc()).nullsLast()))
    .orderBy('candidate.id', descending ? 'desc' : 'asc')
    .limit(slice.limit)
    .offset(slice.offset)
    .execute()
  const place = new Map(ids.map(({ id }, index) => [id, index]))
  const rows = await candidateRows(db)
    .where('candidate.id', 'in', among([...place.keys()]))
    .execute()
  return rows.toSorted((a, b) => place.get(a.id)! - place.get(b.id)!)
}

export async function countCandidateSlice(
  db: Kysely<DB>,
  scope: CandidateScope,
  filter: CandidateFilter,
): Promise<number> {
  const row = await filtered(db, scope, filter)
    .select((e) => e.fn.countAll<number>().as('count'))
    .executeTakeFirstOrThrow()
  return row.count
}

/** Confirmed candidates. A calibration candidate is never one, whatever its state says. */
function confirmed(db: Kysely<DB>, scope: CandidateScope) {
  return candidates(db, { ...scope, withCalibration: false })
    .where('candidate.state', '=', 'confirmed')
    .where('candidate.truth', 'is', null)
}

/** In the order of their ids, from after `afterId`; only those whose verdict the reader may see. */
export async function listEntriesAfter(
  db: Kysely<DB>,
  scope: CandidateScope,
  page: { afterId: number; limit: number },
) {
  return confirmed(db, scope)
    .leftJoin('verdict', 'verdict.id', 'candidate.verdict_id')
    .leftJoin('ruling', (join) =>
      join.onRef('ruling.id', '=', 'candidate.ruling_id').on('ruling.outcome', '!=', 'by verdict'),
    )
    .leftJoin('designation', 'designation.candidate_id', 'candidate.id')
    .select([
      'candidate.id',
      'candidate.name',
      'candidate.ra_deg as raDeg',
      'candidate.dec_deg as decDeg',
      'candidate.lens_redshift as lensRedshift',
      'candidate.source_redshift as sourceRedshift',
      'candidate.state_since as stateSince',
      'designation.designation',
      'verdict.reason as verdictReason',
      'verdict.probability',
      'ruling.id as rulingId',
      'ruling.grade as rulingGrade',
      'ruling.reason as rulingReason',
    ])
    .select((e) =>
      e
        .selectFrom('entry')
        .select('entry.at')
        .whereRef('entry.candidate_id', '=', 'candidate.id')
        .where('entry.event', '=', 'entered')
        .orderBy('entry.id', 'desc')
        .limit(1)
        .as('enteredAt'),
    )
    .where(isRevealed(scope))
    .where('candidate.id', '>', page.afterId)
    .orderBy('candidate.id')
    .limit(page.limit)
    .execute()
}
export type EntryRow = Awaited<ReturnType<typeof listEntriesAfter>>[number]

/**
 * The answers that count, by candidate and in the order given: of each person the newest, first look or asked for. A later
 * row of the same person is either a correction of the earlier one or a look that they were asked for afterwards. Those of people who
 * are left out of the consensus are marked.
 */
export async function listEntryAnswers(db: Kysely<DB>, campaignId: number, candidateIds: readonly number[]) {
  return db
    .selectFrom('grade')
    .innerJoin('membership', (join) =>
      join
        .onRef('membership.campaign_id', '=', 'grade.campaign_id')
        .onRef('membership.person_id', '=', 'grade.person_id'),
    )
    .select([
      'grade.candidate_id as candidateId',
      'grade.grade',
      'grade.tags',
      'grade.remark',
      'membership.pseudonym as by',
    ])
    .select(
      sql<0 | 1>`coalesce((select decision.left_out from left_out decision
        where decision.campaign_id = grade.campaign_id and decision.person_id = grade.person_id
        order by decision.id desc limit 1), 0)`.as('leftOut'),
    )
    .where(inCampaign('grade.campaign_id', campaignId))
    .where('grade.candidate_id', 'in', among(candidateIds))
    .where('grade.occasion', 'in', ['first', 'asked'])
    .where((e) =>
      e.not(
        e.exists(
          e
            .selectFrom('grade as later')
            .select('later.id')
            .whereRef('later.candidate_id', '=', 'grade.candidate_id')
            .whereRef('later.person_id', '=', 'grade.person_id')
            .whereRef('later.id', '>', 'grade.id')
            .where('later.occasion', 'in', ['first', 'asked']),
        ),
      ),
    )
    .orderBy('grade.candidate_id')
    .orderBy('grade.id')
    .execute()
}
export type EntryAnswer = Awaited<ReturnType<typeof listEntryAnswers>>[number]

/** The colour stamp of each candidate by the newest recipe that made one, or the first view of that recipe. */
export async function listThumbnails(
  db: Kysely<DB>,
  campaignId: number,
  candidateIds: readonly number[],
): Promise<{ candidateId: number; sha256: string }[]> {
  return db
    .selectFrom('stamp')
    .select(['candidate_id as candidateId', 'sha256'])
    .where(inCampaign('stamp.campaign_id', campaignId))
    .where('candidate_id', 'in', among(candidateIds))
    .where('id', '=', (e) =>
      e
        .selectFrom('stamp as best')
        .select('best.id')
        .whereRef('best.candidate_id', '=', 'stamp.candidate_id')
        .orderBy('best.recipe_id', 'desc')
        .orderBy(sql`best.view = 'colour'`, 'desc')
        .orderBy('best.id')
        .limit(1),
    )
    .execute()
}
