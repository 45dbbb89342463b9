import { REGION_FIELDS } from './sky-region'
import type { ColumnFilterKind } from './table-column'

/**
 * What a person has made of a table, and how it stands in the address, so that a shared link shows the same table:
 *
 *     ?sort=-mean        by falling mean                       ?mean=2..3&class=A,B   narrowed by columns
 *     ?columns=ra,mean   these columns, in this order          ?near=150.1+2.2&within=30+arcsec   in a cone
 *     ?page=2
 *
 * What is as the table comes is left out. What does not fit the table is passed over, never an error: links grow old.
 */
export interface TableState {
  sort: TableSort[]
  /** By column, as typed. */
  filters: Readonly<Record<string, string>>
  /** Ids of the columns shown beside the pinned ones, in their order. */
  columns: string[]
  /** from 0 */
  page: number
}

/** Rows on a page. */
export const PAGE_SIZE = 100

export interface TableSort {
  id: string
  descending: boolean
}

/** As much of the columns as the address needs to know; a `TableColumn` is one. */
export interface ShapeColumn {
  id: string
  filter?: ColumnFilterKind
  sortable?: boolean
  hidden?: boolean
  filterOnly?: boolean
  pinned?: boolean
}

export interface TableShape {
  columns: readonly ShapeColumn[]
  defaultSort: TableSort
  /** Rows have a place on the sky. */
  hasRegion?: boolean
}

function choosable(shape: TableShape): ShapeColumn[] {
  return shape.columns.filter(({ pinned, filterOnly }) => !pinned && !filterOnly)
}

export function shownByDefault(shape: TableShape): string[] {
  return choosable(shape)
    .filter((column) => !column.hidden)
    .map((column) => column.id)
}

export function readTableState(shape: TableShape, search: string | URLSearchParams): TableState {
  const query = new URLSearchParams(search)
  const byId = new Map(shape.columns.map((column) => [column.id, column]))
  const sort = (query.get('sort') ?? '')
    .split(',')
    .map((part) => ({ id: part.replace(/^-/, ''), descending: part.startsWith('-') }))
    .filter(({ id }, index, all) => byId.get(id)?.sortable && all.findIndex((other) => other.id === id) === index)
  const filters: Record<string, string> = {}
  for (const { id, filter } of shape.columns) {
    const text = query.get(id)
    if (filter && text?.trim()) filters[id] = text
  }
  for (const id of REGION_FIELDS) {
    const text = query.get(id)
    if (shape.hasRegion && text?.trim()) filters[id] = text
  }
  const free = new Set(choosable(shape).map(({ id }) => id))
  const asked = query.get('columns')?.split(',')
  const columns = asked ? [...new Set(asked)].filter((id) => free.has(id)) : shownByDefault(shape)
  const page = /^\d{1,9}$/.test(query.get('page') ?? '') ? Math.max(0, Number(query.get('page')) - 1) : 0
  return { sort: sort.length ? sort : [shape.defaultSort], filters, columns, page }
}

/** The query of the address, without a question mark; empty for a table as it comes. */
export function writeTableState(shape: TableShape, state: TableState): string {
  const query = new URLSearchParams()
  const sort = state.sort.map(writeSort).join(',')
  if (sort !== writeSort(shape.defaultSort)) query.set('sort', sort)
  for (const id of [...shape.columns.map((column) => column.id), ...REGION_FIELDS]) {
    if (state.filters[id]?.trim()) query.set(id, state.filters[id])
  }
  const columns = state.columns.join(',')
  if (columns !== shownByDefault(shape).join(',')) query.set('columns', columns)
  if (state.page > 0) query.set('page', String(state.page + 1))
  // Commas and dots need no escape in a query, and without them the address can be read.
  return query.toString().replaceAll('%2C', ',')
}

function writeSort({ id, descending }: TableSort): string {
  return `${descending ? '-' : ''}${id}`
}

/** The chosen ones of a filter by values. */
export function chosenOf(text: string | undefined): string[] {
  return text ? text.split(',').filter(Boolean) : []
}
