import type { Column, RowData } from '@tanstack/react-table'
import { ArrowDown, ArrowUp } from 'lucide-react'
import type { TableColumn } from './table-column'
import type { Features } from './table-model'

/** Kept in sight while the rest scrolls sideways; not on a phone, where it would leave no room for the rest. */
export const PINNED = 'md:sticky md:left-0 md:z-10 md:shadow-[1px_0_0_var(--line)]'

interface HeadCellProps<Row extends RowData> {
  column: TableColumn<Row>
  head: Column<Features, Row, unknown>
}

export function HeadCell<Row extends RowData>({ column, head }: HeadCellProps<Row>) {
  const sorted = head.getIsSorted()
  const order = sorted === 'asc' ? 'ascending' : sorted === 'desc' ? 'descending' : 'none'
  const Arrow = sorted === 'asc' ? ArrowUp : ArrowDown
  const text = column.title ? (
    <abbr title={column.title} className="no-underline">
      {column.label}
    </abbr>
  ) : (
    column.label
  )
  return (
    <th
      scope="col"
      aria-sort={column.sortable ? order : undefined}
      className={`h-row whitespace-nowrap border-b border-line bg-page px-2 text-note font-semibold ${column.numeric ? 'text-right' : 'text-left'} ${sorted ? 'text-text' : 'text-mute'} ${column.pinned ? PINNED : ''}`}
    >
      {column.sortable ? (
        <button
          type="button"
          onClick={head.getToggleSortingHandler()}
          className="group/head relative inline-flex min-h-6 min-w-6 items-center justify-center rounded-key hover:text-text"
        >
          {text}
          <Arrow
            size={11}
            aria-hidden="true"
            className={`absolute ${column.numeric ? '-left-3' : '-right-3'} ${sorted ? '' : 'opacity-0 group-hover/head:opacity-50 group-focus-visible/head:opacity-50'}`}
          />
        </button>
      ) : (
        text
      )}
    </th>
  )
}
