import type { ReactNode } from 'react'

/** How a column is narrowed: by part of its text, by a range of numbers, or by some of a few values. */
export type ColumnFilterKind = 'text' | 'range' | readonly string[]

/** A column of a data table: what it is called, what its value is, how it is drawn. Keep the list of columns at module level. */
export interface TableColumn<Row> {
  /** Stands in the address; never `sort`, `columns` or `page`. */
  id: string
  /** As short as a head must be. */
  label: string
  /** In full, where the label is an abbreviation. */
  title?: string
  /** What sorting and filtering look at; undefined comes last. */
  value?: (row: Row) => string | number | undefined
  cell: (row: Row) => ReactNode
  filter?: ColumnFilterKind
  /** The next column has no filter, and this one's may take its room too. */
  filterSpills?: boolean
  sortable?: boolean
  /** The first click sorts from the largest down. */
  largestFirst?: boolean
  numeric?: boolean
  /** Not shown until somebody asks for it. */
  hidden?: boolean
  /** The column that names the row: always shown, and kept in sight. */
  pinned?: boolean
}
