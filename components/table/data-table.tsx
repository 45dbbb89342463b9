'use client'

import { useTable, type RowData } from '@tanstack/react-table'
import { useMemo, useState, type KeyboardEvent, type ReactNode } from 'react'
import { ColumnChooser } from './column-chooser'
import { FilterField } from './filter-field'
import { HeadCell, PINNED } from './head-cell'
import { Pager } from './pager'
import type { TableColumn } from './table-column'
import { columnDefs, features } from './table-model'
import { PAGE_SIZE, type TableShape, type TableSort } from './table-state'
import { ToolButton } from './tool-button'
import { useTableState } from './use-table-state'

interface DataTableProps<Row> {
  /** What the rows are, for those who cannot see the table: 'Confirmed candidates'. */
  label: string
  /** What several rows are called in counts. */
  noun: string
  columns: readonly TableColumn<Row>[]
  rows: readonly Row[]
  rowId: (row: Row) => string
  defaultSort: TableSort
  /** Given where the server sorts, filters and pages: `rows` are then one page of `count`, of `all` without a filter. */
  served?: { count: number; all: number }
  /** Beside the tools at the top. */
  children?: ReactNode
}

/** ArrowUp and ArrowDown move between the links of rows; Tab goes on as everywhere. */
function moveBetweenRows(event: KeyboardEvent<HTMLTableSectionElement>) {
  if (event.key !== 'ArrowDown' && event.key !== 'ArrowUp') return
  const row = (event.target as HTMLElement).closest('tr')
  const next = event.key === 'ArrowDown' ? row?.nextElementSibling : row?.previousElementSibling
  const link = next?.querySelector<HTMLElement>('a, button')
  if (!link) return
  event.preventDefault()
  link.focus()
}

/** `by mean grade, falling`. An order that no column stands for is that of arrival. */
function describeOrder<Row>(columns: readonly TableColumn<Row>[], sort: readonly TableSort[]): string {
  const parts = sort.map(({ id, descending }) => {
    const column = columns.find((one) => one.id === id)
    if (!column) return 'in the order of arrival'
    return `by ${(column.title ?? column.label).split(',')[0].toLowerCase()}, ${descending ? 'falling' : 'rising'}`
  })
  return parts.join(', then ')
}

/**
 * A table for people who read tables all day: 32-px rows, a head that stays, sorting by heads that are buttons, a filter below
 * each head, a choice of columns, pages of 100 rows, and all of that in the address.
 */
export function DataTable<Row extends RowData>(props: DataTableProps<Row>) {
  const { label, noun, columns, rows, rowId, defaultSort, served, children } = props
  const shape = useMemo<TableShape>(() => ({ columns, defaultSort }), [columns, defaultSort])
  const { state, update, isPending } = useTableState(shape, served ? 'server' : 'browser')
  const defs = useMemo(() => columnDefs(columns), [columns])
  const filterCount = Object.keys(state.filters).length
  const [filtersWanted, setFiltersWanted] = useState<boolean | null>(null)
  const filtersOpen = filtersWanted ?? filterCount > 0

  const sorting = state.sort.map(({ id, descending }) => ({ id, desc: descending }))
  const columnFilters = Object.entries(state.filters).map(([id, value]) => ({ id, value }))
  const columnVisibility = Object.fromEntries(
    columns.map(({ id, pinned }) => [id, Boolean(pinned) || state.columns.includes(id)]),
  )
  const table = useTable({
    features,
    columns: defs,
    data: rows,
    getRowId: rowId,
    state: { sorting, columnFilters, columnVisibility, pagination: { pageIndex: state.page, pageSize: PAGE_SIZE } },
    onSortingChange: (change) => {
      const next = typeof change === 'function' ? change(sorting) : change
      update({ sort: next.map(({ id, desc }) => ({ id, descending: desc })) })
    },
    enableSortingRemoval: false,
    enableMultiSort: !served,
    autoResetPageIndex: false,
    ...(served
      ? { manualSorting: true, manualFiltering: true, manualPagination: true, rowCount: served.count }
      : { manualSorting: false }),
  })

  const byId = new Map(columns.map((column) => [column.id, column]))
  const shown = table.getVisibleLeafColumns().flatMap(({ id }) => byId.get(id) ?? [])
  const count = served ? served.count : table.getFilteredRowModel().rows.length
  const all = served ? served.all : rows.length
  const heads = table.getHeaderGroups()[0]?.headers ?? []
  const setFilter = (id: string, text: string) => {
    const { [id]: _old, ...others } = state.filters
    update({ filters: text ? { ...others, [id]: text } : others })
  }

  return (
    <div className="flex min-h-0 flex-1 flex-col gap-2">
      <div className="flex flex-wrap items-center gap-x-3 gap-y-2">
        <p role="status" className="mr-auto text-small text-mute first-letter:uppercase">
          {filterCount > 0 && !isPending
            ? `${count.toLocaleString('en')} of ${all.toLocaleString('en')} ${noun}, `
            : ''}
          {describeOrder(columns, state.sort)}
          {isPending ? ' · reading…' : ''}
        </p>
        {filterCount > 0 ? <ToolButton onClick={() => update({ filters: {} })}>Clear filters</ToolButton> : null}
        <ToolButton aria-expanded={filtersOpen} onClick={() => setFiltersWanted(!filtersOpen)}>
          Filters{filterCount > 0 ? ` (${filterCount})` : ''}
        </ToolButton>
        <ColumnChooser
          shape={shape}
          columns={columns}
          shown={state.columns}
          onChange={(ids) => update({ columns: ids })}
        />
        {children}
      </div>
      <div
        role="region"
        aria-label={label}
        aria-busy={isPending}
        tabIndex={0}
        className="min-h-40 flex-1 overflow-auto rounded-tray border border-line"
      >
        <table className="w-full border-separate border-spacing-0 text-small">
          <thead className="sticky top-0 z-20 bg-page">
            <tr>
              {heads.map((head) => {
                const column = byId.get(head.column.id)
                return column ? <HeadCell key={head.id} column={column} head={head.column} /> : null
              })}
            </tr>
            {filtersOpen ? (
              <tr>
                {shown.map((column) => (
                  <td
                    key={column.id}
                    className={`border-b border-line bg-page px-2 pb-1.5 ${column.pinned ? PINNED : ''}`}
                  >
                    {column.filter ? (
                      <FilterField column={column} value={state.filters[column.id] ?? ''} onChange={setFilter} />
                    ) : null}
                  </td>
                ))}
              </tr>
            ) : null}
          </thead>
          <tbody onKeyDown={moveBetweenRows} className={isPending ? 'opacity-60' : ''}>
            {table.getRowModel().rows.map((row) => (
              <tr key={row.id} className="group">
                {shown.map((column) => {
                  const Cell = column.pinned ? 'th' : 'td'
                  return (
                    <Cell
                      key={column.id}
                      scope={column.pinned ? 'row' : undefined}
                      className={`h-row whitespace-nowrap border-b border-line bg-page px-2 text-left font-normal group-focus-within:bg-raise group-hover:bg-raise ${column.numeric ? 'figures text-right text-note' : ''} ${column.pinned ? PINNED : ''}`}
                    >
                      {column.cell(row.original)}
                    </Cell>
                  )
                })}
              </tr>
            ))}
          </tbody>
        </table>
        {count === 0 ? (
          <p className="sticky left-0 p-6 text-small text-mute">
            Nothing passes these filters. Loosen one, or clear them all.
          </p>
        ) : null}
      </div>
      <Pager page={state.page} pageSize={PAGE_SIZE} count={count} onChange={(page) => update({ page })} />
    </div>
  )
}
