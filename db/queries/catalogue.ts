import { sql, type Kysely, type RawBuilder, type SqlBool } from 'kysely'
import type { DB } from '../schema'
import type { CandidateState, StateCause } from '../schema/intake'
import { among, inCampaign } from './by-ids'
import { isShownTo } from './verdicts'

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
  lensRedshift: number | null
  sourceRedshift: number | null
  /** What its state rests on; null while it is open. */
  decidedBy: StateCause | null
  /** Of an entry of the catalogue. */
  enteredAt: string | null
}

/** Whether the reader may see what was judged of a candidate, whose id stands in `column`. */
export function isRevealed({ campaignId, judgedBy }: CandidateScope, column = 'candidate.id'): RawBuilder<SqlBool> {
  if (judgedBy === null) return sql<SqlBool>`true`
  return sql<SqlBool>`${sql.ref(column)} in (select judged.candidate_id from judged
    where judged.campaign_id = ${campaignId} and judged.person_id = ${judgedBy})`
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
    .innerJoin('listing', (join) =>
      join
        .onRef('listing.campaign_id', '=', 'candidate.campaign_id')
        .onRef('listing.candidate_id', '=', 'candidate.id'),
    )
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
      'candidate.lens_redshift as lensRedshift',
      'candidate.source_redshift as sourceRedshift',
      'listing.decided_by as decidedBy',
      'listing.entered_at as enteredAt',
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

/** In the order of the ids given. */
export async function readCandidateRows(db: Kysely<DB>, ids: readonly number[]): Promise<CandidateRow[]> {
  return inOrder(ids, await candidateRows(db).where('candidate.id', 'in', among(ids)).execute())
}

function inOrder<Row extends { id: number }>(ids: readonly number[], rows: readonly Row[]): Row[] {
  const place = new Map(ids.map((id, index) => [id, index]))
  return rows.toSorted((a, b) => place.get(a.id)! - place.get(b.id)!)
}

/** Confirmed candidates. A calibration candidate is never one, whatever its state says. */
function confirmed(db: Kysely<DB>, scope: CandidateScope) {
  return candidates(db, { ...scope, withCalibration: false })
    .where('candidate.state', '=', 'confirmed')
    .where('candidate.truth', 'is', null)
}

/** What is confirmed and whose verdict the reader may see. */
function entries(db: Kysely<DB>, scope: CandidateScope) {
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
}

/** In the order of their ids, from after `afterId`. */
export async function listEntriesAfter(
  db: Kysely<DB>,
  scope: CandidateScope,
  page: { afterId: number; limit: number },
) {
  return entries(db, scope).where('candidate.id', '>', page.afterId).orderBy('candidate.id').limit(page.limit).execute()
}

/** In the order of the ids given. */
export async function listEntriesAmong(db: Kysely<DB>, scope: CandidateScope, ids: readonly number[]) {
  const rows = await entries(db, scope).where('candidate.id', 'in', among(ids)).execute()
  return inOrder(ids, rows)
}
export type EntryRow = Awaited<ReturnType<typeof listEntriesAfter>>[number]

/**
 * The answers that count, by candidate and in the order given: of each person the newest, first look or asked for. A later
 * row of the same person is either a correction of the earlier one or a look that they were asked for afterwards. Those of people who
 * are left out of the consensus are marked.
 * @param graderId a grader who is shown them: of a calibration stamp their own, and those of people whose messages they read
 */
export async function listEntryAnswers(
  db: Kysely<DB>,
  campaignId: number,
  candidateIds: readonly number[],
  graderId?: number,
) {
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
    .$if(graderId !== undefined, (query) => query.where(isShownTo(graderId!)))
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
