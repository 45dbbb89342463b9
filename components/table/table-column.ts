import type { ReactNode } from 'react'

/**
 * How a column is narrowed: by parts of its text, by a range of numbers, of days, of right ascensions or of declinations, or by some of a
 * few values.
 */
export type ColumnFilterKind = 'text' | 'range' | 'date' | 'ra' | 'dec' | readonly string[]

/** A column of a data table: what it is called and how it is drawn. Keep the list of columns at module level. */
export interface TableColumn<Row> {
  /** Stands in the address; never `sort`, `columns`, `page`, `near` or `within`. */
  id: string
  /** As short as a head must be. */
  label: string
  /** In full, where the label is an abbreviation. */
  title?: string
  cell: (row: Row) => ReactNode
  filter?: ColumnFilterKind
  /** What the field of the filter is called, where the column's title does not say it. */
  filterTitle?: string
  sortable?: boolean
  /** The first click sorts from the largest down. */
  largestFirst?: boolean
  numeric?: boolean
  /** Not shown until somebody asks for it. */
  hidden?: boolean
  /** Only a filter: it is never shown as a column. */
  filterOnly?: boolean
  /** The column that names the row: always shown, and kept in sight. */
  pinned?: boolean
}
