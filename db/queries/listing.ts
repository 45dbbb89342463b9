import { sql, type Kysely, type RawBuilder, type SqlBool } from 'kysely'
import type { DB } from '../schema'
import { isRevealed as isRevealedAt, type CandidateScope } from './catalogue'
import { among } from './by-ids'
import { isWithin, meets, type ColumnCondition, type SkyCone } from './list-conditions'
import { listColumns, type ListColumn, type ListColumnName } from './list-columns'

/** Which table is listed: every candidate, or what is confirmed and may be seen as such. */
export type ListedTable = 'candidates' | 'catalogue'

export interface ListFilter {
  /** All of them hold. */
  columns?: readonly { column: ListColumnName; condition: ColumnCondition }[]
  cone?: SkyCone
  /** Any of these: candidates in one of the states, withheld from the reader, or not sent on by the first pass. */
  stages?: readonly number[]
  withheld?: boolean
  notSentOn?: boolean
  /** Of these candidates; of others; of others that are decided. The reader may know what they were chosen by. */
  among?: readonly number[]
  without?: readonly number[]
  notAmong?: readonly number[]
}

export interface ListOrder {
  /** null: the order of arrival. */
  column: ListColumnName | null
  descending: boolean
}

/** Whether the reader may see what was judged of the candidate `l`. */
const isRevealed = (scope: CandidateScope) => isRevealedAt(scope, 'l.candidate_id')

export const isFiltered = ({
  columns,
  cone,
  stages,
  withheld,
  notSentOn,
  among: ids,
  without,
  notAmong,
}: ListFilter): boolean =>
  Boolean(columns?.length || cone || stages?.length || withheld || notSentOn || ids || without || notAmong)

/**
 * The rows `l` of a table that pass the filter. A filter on what is withheld from the reader finds only what is revealed to them, so
 * that what it finds or leaves out tells nothing that the table does not show.
 */
function filtered(db: Kysely<DB>, scope: CandidateScope, table: ListedTable, filter: ListFilter) {
  const { columns = [], cone, stages = [], withheld = false, notSentOn = false } = filter
  const known = listColumns(scope, table)
  const revealed = isRevealed(scope)
  const anyState: RawBuilder<SqlBool>[] = []
  if (stages.length > 0) anyState.push(sql`(l.stage in ${among(stages)} and ${revealed})`)
  if (withheld) anyState.push(sql`not ${revealed}`)
  if (notSentOn) anyState.push(sql`(l.first_pass = 'dropped' and l.is_stamp = 0)`)
  return (
    db
      .selectFrom('listing as l')
      .where('l.campaign_id', '=', scope.campaignId)
      .$if(!scope.withCalibration && table === 'candidates', (query) => query.where('l.is_stamp', '=', 0))
      // No calibration stamp ever has an entry.
      .$if(table === 'catalogue', (query) => query.where('l.entered_at', 'is not', null).where(revealed))
      .$if(anyState.length > 0, (query) => query.where(sql<SqlBool>`(${sql.join(anyState, sql` or `)})`))
      .$if(filter.among !== undefined, (query) => query.where(sql<SqlBool>`l.candidate_id in ${among(filter.among!)}`))
      .$if(filter.without !== undefined, (query) =>
        query.where(sql<SqlBool>`l.candidate_id not in ${among(filter.without!)}`),
      )
      .$if(filter.notAmong !== undefined, (query) =>
        query
          .where(sql<SqlBool>`l.candidate_id not in ${among(filter.notAmong!)}`)
          .$if(scope.judgedBy !== null, (one) => one.where(revealed).where('l.stage', '>', 0)),
      )
      .$if(cone !== undefined, (query) => query.where(isWithin(scope.campaignId, cone!)))
      .$call((query) =>
        columns.reduce((all, { column, condition }) => {
          const { told = null, ...of } = known[column] ?? {}
          if (!('value' in of)) return all.where(sql<SqlBool>`false`)
          return all.where(meets(of, condition)).$if(told !== null, (one) => one.where(revealed).where(told!))
        }, query),
      )
  )
}

/** What must hold for a row to be sorted by the column; undefined where nothing must. */
const sortedOf = (scope: CandidateScope, { told, sorted }: ListColumn) =>
  sorted ?? (told && sql<SqlBool>`(${isRevealed(scope)} and ${told})`)

export interface ListSlice {
  filter: ListFilter
  order: ListOrder
  offset: number
  limit: number
}

/**
 * The ids of one slice of a table without a filter, or by arrival, in order: an index is walked. What has no value there, or none that
 * the reader may see, comes last either way, by arrival; so its place tells nothing.
 */
export async function listSlice(
  db: Kysely<DB>,
  scope: CandidateScope,
  table: ListedTable,
  { filter, order, offset, limit }: ListSlice,
): Promise<number[]> {
  const direction = order.descending ? 'desc' : 'asc'
  const rows = () => filtered(db, scope, table, filter).select('l.candidate_id as id')
  const column = order.column === null ? undefined : listColumns(scope, table)[order.column]
  if (!column) {
    const ids = await rows().orderBy('l.candidate_id', direction).limit(limit).offset(offset).execute()
    return ids.map(({ id }) => id)
  }
  const key = column.order ?? column.value
  const isSorted = sortedOf(scope, column)
  const present = column.isAlwaysThere ? sql<SqlBool>`true` : sql<SqlBool>`${key} is not null`
  const seen = isSorted ? sql<SqlBool>`(${isSorted} and ${present})` : present
  const countSeen = () => count(filtered(db, scope, table, filter).where(seen))
  // A grader's own are few: where the page lies behind them they need not be sorted.
  const known = isSorted && offset > 0 ? await countSeen() : null
  const sorted =
    known !== null && offset >= known
      ? []
      : await rows()
          .where(seen)
          .orderBy(column.sorted ? sql`+${key}` : key, direction)
          .orderBy('l.candidate_id', direction)
          .limit(limit)
          .offset(offset)
          .execute()
  const ids = sorted.map(({ id }) => id)
  if (ids.length === limit) return ids
  const before = ids.length > 0 || offset === 0 ? offset + ids.length : (known ?? (await countSeen()))
  const others = await rows()
    .where(sql<SqlBool>`not ${isSorted ? sql`coalesce(${seen}, false)` : seen}`)
    .orderBy('l.candidate_id', direction)
    .limit(limit - ids.length)
    .offset(Math.max(0, offset + ids.length - before))
    .execute()
  return [...ids, ...others.map(({ id }) => id)]
}

/**
 * The same for a table with a filter, in one reading of the campaign's rows, which costs the same whatever the order.
 * @returns how many pass on all pages; null behind the last page.
 */
export async function listFiltered(
  db: Kysely<DB>,
  scope: CandidateScope,
  table: ListedTable,
  { filter, order, offset, limit }: ListSlice,
): Promise<{ ids: number[]; count: number | null }> {
  const direction = order.descending ? 'desc' : 'asc'
  const column = order.column === null ? undefined : listColumns(scope, table)[order.column]
  const value = column ? (column.order ?? column.value) : sql`null`
  const isSorted = column && sortedOf(scope, column)
  const key = isSorted ? sql`iif(${isSorted}, ${value}, null)` : value
  const rows = await db
    .with(
      (name) => name('passing').materialized(),
      () => filtered(db, scope, table, filter).select(['l.candidate_id as id', key.as('key')]),
    )
    .selectFrom('passing')
    .select([
      'id',
      (e) =>
        e
          .selectFrom('passing')
          .select((all) => all.fn.countAll<number>().as('count'))
          .as('count'),
    ])
    .orderBy(sql`key is null`)
    .orderBy('key', direction)
    .orderBy('id', direction)
    .limit(limit)
    .offset(offset)
    .execute()
  return { ids: rows.map(({ id }) => id), count: rows[0]?.count ?? null }
}

export async function countListed(
  db: Kysely<DB>,
  scope: CandidateScope,
  table: ListedTable,
  filter: ListFilter,
): Promise<number> {
  return count(filtered(db, scope, table, filter))
}

async function count(rows: ReturnType<typeof filtered>): Promise<number> {
  const row = await rows.select((e) => e.fn.countAll<number>().as('count')).executeTakeFirstOrThrow()
  return row.count
}

/**
 * What a filter on judgements tells something of, to a grader: candidates of theirs among which it chooses, and of which there is
 * something to tell, as far as nobody has noted yet that they were shown it. Empty where nothing that is judged is asked for.
 */
export async function listJudged(db: Kysely<DB>, scope: CandidateScope, filter: ListFilter): Promise<number[]> {
  const known = listColumns(scope, 'candidates')
  const isJudged = (column: ListColumnName) => known[column]?.told !== undefined
  if (!filter.stages?.length && !filter.notAmong && !filter.columns?.some(({ column }) => isJudged(column))) return []
  const open = { cone: filter.cone, columns: filter.columns?.filter(({ column }) => !isJudged(column)) }
  const rows = await filtered(db, scope, 'candidates', open)
    .select('l.candidate_id as id')
    .where(isRevealed(scope))
    .where(sql<SqlBool>`(l.stage > 0 or l.outcome <> 'open' or (l.is_stamp = 0 and l.grades + l.cannot_judge > 1))`)
    .where(isNotShown(scope))
    .execute()
  return rows.map(({ id }) => id)
}

/** Candidates of a campaign of which somebody has measured anything. */
export async function listMeasuredIds(db: Kysely<DB>, campaignId: number): Promise<number[]> {
  const rows = await db
    .selectFrom('measurement')
    .select('candidate_id as id')
    .distinct()
    .where('campaign_id', '=', campaignId)
    .where('event', '=', 'measured')
    .execute()
  return rows.map(({ id }) => id)
}

/** How many entries a grader may see, and those of them of which nobody has noted yet that they were shown. */
export async function listEntriesNotShown(
  db: Kysely<DB>,
  scope: CandidateScope,
): Promise<{ all: number; notShown: number[] }> {
  const row = await filtered(db, scope, 'catalogue', {})
    .select((e) => e.fn.countAll<number>().as('all'))
    .select(sql<string>`json_group_array(l.candidate_id) filter (where ${isNotShown(scope)})`.as('notShown'))
    .executeTakeFirstOrThrow()
  return { all: row.all, notShown: JSON.parse(row.notShown) as number[] }
}

const isNotShown = ({ judgedBy }: CandidateScope) =>
  sql<SqlBool>`not exists (select 1 from judgement_shown shown
    where shown.candidate_id = l.candidate_id and shown.person_id = ${judgedBy})`
