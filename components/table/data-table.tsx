'use client'

import { useTable, type RowData } from '@tanstack/react-table'
import { useMemo, useRef, useState, type KeyboardEvent, type ReactNode } from 'react'
import type { SkyPosition } from '@/lib/science/sky/separation'
import { ActiveFilters } from './active-filters'
import { ColumnChooser } from './column-chooser'
import { FilterPanel } from './filter-panel'
import { HeadCell, PINNED } from './head-cell'
import { Pager } from './pager'
import { SavedViews, type ViewsOfTable } from './saved-views'
import type { TableColumn } from './table-column'
import { columnDefs, features } from './table-model'
import { PAGE_SIZE, readTableState, writeTableState, type TableShape, type TableSort } from './table-state'
import { ToolButton } from './tool-button'
import { useTableState } from './use-table-state'

interface DataTableProps<Row> {
  /** What the rows are, for those who cannot see the table: 'Confirmed candidates'. */
  label: string
  /** What several rows are called in counts. */
  noun: string
  columns: readonly TableColumn<Row>[]
  /** One page of `count`, of `all` without a filter: the server sorts, filters and pages. */
  rows: readonly Row[]
  count: number
  all: number
  rowId: (row: Row) => string
  defaultSort: TableSort
  /** Where the row lies; without, there is no region to choose. Keep it at module level. */
  position?: (row: Row) => SkyPosition | null
  /** Without, none can be saved. */
  views?: ViewsOfTable
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
function describeOrder<Row>(columns: readonly TableColumn<Row>[], [sort]: readonly TableSort[]): string {
  const column = columns.find((one) => one.id === sort.id)
  if (!column) return 'in the order of arrival'
  return `by ${(column.title ?? column.label).split(',')[0].toLowerCase()}, ${sort.descending ? 'falling' : 'rising'}`
}

/**
 * A table for people who read tables all day: 32-px rows, a head that stays, sorting by heads that are buttons, a filter for every
 * column, a choice and order of columns, pages of 100 rows, and all of that in the address.
 */
export function DataTable<Row extends RowData>(props: DataTableProps<Row>) {
  const { label, noun, columns, rows, count, all, rowId, defaultSort, position, views, children } = props
  const hasRegion = position !== undefined
  const shape = useMemo<TableShape>(() => ({ columns, defaultSort, hasRegion }), [columns, defaultSort, hasRegion])
  const { state, update, isPending } = useTableState(shape)
  const defs = useMemo(() => columnDefs(columns), [columns])
  const filterCount = Object.keys(state.filters).length
  const [filtersOpen, setFiltersOpen] = useState(false)
  const filtersButton = useRef<HTMLButtonElement>(null)
  const closeFilters = () => {
    setFiltersOpen(false)
    filtersButton.current?.focus()
  }

  const sorting = state.sort.map(({ id, descending }) => ({ id, desc: descending }))
  const pinned = columns.flatMap((column) => (column.pinned ? [column.id] : []))
  const columnVisibility = Object.fromEntries(
    columns.map(({ id }) => [id, pinned.includes(id) || state.columns.includes(id)]),
  )
  const table = useTable({
    features,
    columns: defs,
    data: rows,
    getRowId: rowId,
    state: { sorting, columnVisibility, columnOrder: [...pinned, ...state.columns] },
    onSortingChange: (change) => {
      const next = typeof change === 'function' ? change(sorting) : change
      update({ sort: next.map(({ id, desc }) => ({ id, descending: desc })) })
    },
    enableSortingRemoval: false,
    enableMultiSort: false,
    manualSorting: true,
  })

  const byId = new Map(columns.map((column) => [column.id, column]))
  const shown = table.getVisibleLeafColumns().flatMap(({ id }) => byId.get(id) ?? [])
  const heads = table.getHeaderGroups()[0]?.headers ?? []
  const setFilter = (id: string, text: string) => {
    const { [id]: _old, ...others } = state.filters
    update({ filters: text ? { ...others, [id]: text } : others }, id)
  }
  const positions = useMemo(() => (position ? rows.flatMap((row) => position(row) ?? []) : null), [position, rows])
  const found = `${count.toLocaleString('en')} of ${all.toLocaleString('en')} ${noun}`

  return (
    <div className="flex min-h-0 flex-1 flex-col gap-2">
      <div className="flex flex-wrap items-center gap-x-3 gap-y-2 max-md:[&_button]:min-h-11">
        <p role="status" className="mr-auto text-small text-mute first-letter:uppercase max-md:w-full">
          {filterCount > 0 && !isPending ? `${found}, ` : ''}
          {describeOrder(columns, state.sort)}
          {isPending ? ' · reading…' : ''}
        </p>
        {views ? (
          <SavedViews
            {...views}
            query={writeTableState(shape, { ...state, page: 0 })}
            normalised={(query) => writeTableState(shape, { ...readTableState(shape, query), page: 0 })}
          />
        ) : null}
        <ToolButton ref={filtersButton} aria-expanded={filtersOpen} onClick={() => setFiltersOpen(!filtersOpen)}>
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
      <ActiveFilters
        columns={columns}
        filters={state.filters}
        onTakeOff={(id) => setFilter(id, '')}
        onClear={() => update({ filters: {} })}
      />
      {filtersOpen ? (
        <FilterPanel
          columns={columns}
          filters={state.filters}
          onChange={setFilter}
          positions={positions}
          found={found}
          onClose={closeFilters}
        />
      ) : null}
      <div
        role="region"
        aria-label={label}
        aria-busy={isPending}
        tabIndex={0}
        className="relative min-h-40 flex-1 overflow-auto max-md:max-h-[76dvh] rounded-tray border border-line"
      >
        <table className="w-full border-separate border-spacing-0 text-small">
          <thead className="sticky top-0 z-20 bg-page">
            <tr>
              {heads.map((head) => {
                const column = byId.get(head.column.id)
                return column ? <HeadCell key={head.id} column={column} head={head.column} /> : null
              })}
            </tr>
          </thead>
          <tbody onKeyDown={moveBetweenRows} className={isPending ? 'opacity-60' : ''}>
            {rows.map((row) => (
              <tr key={rowId(row)} className="group">
                {shown.map((column) => {
                  const Cell = column.pinned ? 'th' : 'td'
                  return (
                    <Cell
                      key={column.id}
                      scope={column.pinned ? 'row' : undefined}
                      className={`h-row whitespace-nowrap border-b border-line bg-page px-2 text-left font-normal group-focus-within:bg-raise group-hover:bg-raise ${column.numeric ? 'figures text-right text-note' : ''} ${column.pinned ? PINNED : ''}`}
                    >
                      {column.cell(row)}
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
