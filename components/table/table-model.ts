import {
  columnOrderingFeature,
  columnVisibilityFeature,
  rowSortingFeature,
  tableFeatures,
  type ColumnDef,
  type RowData,
} from '@tanstack/react-table'
import type { TableColumn } from './table-column'

/** What of TanStack Table a data table uses; rows come sorted, narrowed and paged. */
export const features = tableFeatures({ rowSortingFeature, columnVisibilityFeature, columnOrderingFeature })
export type Features = typeof features

export function columnDefs<Row extends RowData>(columns: readonly TableColumn<Row>[]): ColumnDef<Features, Row>[] {
  return columns.map((column) => ({
    id: column.id,
    header: column.label,
    // Sorting is offered for columns with a value only; which value, the server knows.
    accessorFn: () => null,
    enableSorting: column.sortable ?? false,
    sortDescFirst: column.largestFirst ?? false,
    enableHiding: !column.pinned,
  }))
}
