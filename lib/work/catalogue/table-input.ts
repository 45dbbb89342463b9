import type { ColumnCondition, SkyCone } from '@/db/queries/list-conditions'
import type { ListColumnName } from '@/db/queries/list-columns'
import type { CandidateState } from '@/db/schema/intake'

export type { ColumnCondition, SkyCone }

/** The Einstein radius is combined outside the database. */
export type TableColumnName = ListColumnName | 'einstein'

/** What a table asks for: filters that all hold, an order, and a page. */
export interface TableInput {
  filter: TableFilter
  /** 'id' is the order of arrival. */
  order: TableColumnName | 'id'
  descending: boolean
  /** from 0 */
  page: number
  pageSize: number
  /** Tags and remarks come with the rows. */
  withAnswers?: boolean
}

export interface TableFilter {
  columns?: readonly { column: TableColumnName; condition: ColumnCondition }[]
  cone?: SkyCone
  /** Of the next three any that holds lets a candidate through. */
  states?: readonly CandidateState[]
  /** Candidates whose state the reader may not see yet. */
  withheld?: boolean
  /** What the first pass has not sent on; for leads. */
  notSentOn?: boolean
}

export const STAGES: readonly CandidateState[] = ['open', 'split', 'confirmed', 'set aside']
