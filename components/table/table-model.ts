import {
  columnFilteringFeature,
  columnVisibilityFeature,
  createFilteredRowModel,
  createPaginatedRowModel,
  createSortedRowModel,
  rowPaginationFeature,
  rowSortingFeature,
  tableFeatures,
  type ColumnDef,
  type FilterFn,
  type RowData,
  type SortFn,
} from '@tanstack/react-table'
import { isInRange, parseNumberRange } from './number-range'
import type { ColumnFilterKind, TableColumn } from './table-column'
import { chosenOf } from './table-state'

/** What of TanStack Table a data table uses. */
export const features = tableFeatures({
  rowSortingFeature,
  sortedRowModel: createSortedRowModel(),
  columnFilteringFeature,
  filteredRowModel: createFilteredRowModel(),
  rowPaginationFeature,
  paginatedRowModel: createPaginatedRowModel(),
  columnVisibilityFeature,
})
export type Features = typeof features

const collator = new Intl.Collator('en', { numeric: true, sensitivity: 'base' })

/** Whether a value passes what was typed. A range that cannot be read lets everything pass; its field says so. */
export function passes(kind: ColumnFilterKind, typed: string, value: string | number | undefined): boolean {
  if (typeof kind !== 'string') {
    const chosen = chosenOf(typed)
    return chosen.length === 0 || chosen.includes(String(value))
  }
  if (kind === 'text')
    return String(value ?? '')
      .toLowerCase()
      .includes(typed.trim().toLowerCase())
  const range = parseNumberRange(typed)
  return range === null || (value !== undefined && isInRange(range, Number(value)))
}

function filterBy<Row extends RowData>(kind: ColumnFilterKind): FilterFn<Features, Row> {
  return (row, columnId, typed: string) => passes(kind, typed, row.getValue<string | number | undefined>(columnId))
}

function compare<Row extends RowData>(): SortFn<Features, Row> {
  return (a, b, columnId) => {
    const [x, y] = [a.getValue<string | number>(columnId), b.getValue<string | number>(columnId)]
    return typeof x === 'number' && typeof y === 'number' ? x - y : collator.compare(String(x), String(y))
  }
}

export function columnDefs<Row extends RowData>(columns: readonly TableColumn<Row>[]): ColumnDef<Features, Row>[] {
  return columns.map((column) => ({
    id: column.id,
    header: column.label,
    accessorFn: (row: Row) => column.value?.(row),
    enableSorting: column.sortable ?? false,
    sortFn: compare<Row>(),
    sortDescFirst: column.largestFirst ?? false,
    sortUndefined: 'last',
    enableColumnFilter: column.filter !== undefined,
    ...(column.filter ? { filterFn: filterBy<Row>(column.filter) } : {}),
    enableHiding: !column.pinned,
  }))
}
