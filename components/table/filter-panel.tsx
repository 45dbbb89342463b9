'use client'

import type { SkyPosition } from '@/lib/science/sky/separation'
import { FilterField, TypedField } from './filter-field'
import { RegionPlot } from './region-plot'
import { readRegion, type RegionField } from './sky-region'
import type { TableColumn } from './table-column'
import { ToolButton } from './tool-button'

interface FilterPanelProps<Row> {
  columns: readonly TableColumn<Row>[]
  filters: Readonly<Record<string, string>>
  onChange: (id: string, text: string) => void
  /** Of the rows of this page; null where rows have no place on the sky. */
  positions: readonly SkyPosition[] | null
  /** `12 of 340 candidates` */
  found: string
  onClose: () => void
}

/** Every filter of a table, shown columns or not, with the region of the sky beside them. */
export function FilterPanel<Row>({ columns, filters, onChange, positions, found, onClose }: FilterPanelProps<Row>) {
  const fields = columns.filter(({ id, filter }) => filter && !(positions && (id === 'ra' || id === 'dec')))
  return (
    <section
      aria-label="Filters"
      onKeyDown={(event) => event.key === 'Escape' && onClose()}
      className="flex flex-col gap-x-5 gap-y-4 rounded-tray border border-line bg-raise/40 p-3 md:max-h-[50dvh] md:flex-row md:overflow-y-auto"
    >
      <div className="grid flex-1 grid-cols-2 content-start gap-x-3 gap-y-2.5 md:grid-cols-[repeat(auto-fill,minmax(8.25rem,1fr))]">
        {fields.map((column) => (
          <div key={column.id} className={widthOf(column)}>
            <FilterField column={column} value={filters[column.id] ?? ''} onChange={onChange} />
          </div>
        ))}
      </div>
      {positions ? (
        <RegionFields columns={columns} filters={filters} onChange={onChange} positions={positions} />
      ) : null}
      <ToolButton className="justify-center max-md:min-h-11 md:hidden" onClick={onClose}>
        Show {found}
      </ToolButton>
    </section>
  )
}

/** Choices stand in one line where there is room, names in one line of their own on a phone. */
function widthOf<Row>({ filter, pinned }: TableColumn<Row>): string {
  if (pinned) return 'max-md:col-span-2'
  const letters = typeof filter === 'object' ? filter.join('').length + 2 * filter.length : 0
  if (letters > 45) return 'col-span-2 md:col-span-3'
  return letters > 20 ? 'col-span-2' : ''
}

function RegionFields<Row>({
  columns,
  filters,
  onChange,
  positions,
}: Pick<FilterPanelProps<Row>, 'columns' | 'filters' | 'onChange'> & { positions: readonly SkyPosition[] }) {
  const { cone, problems } = readRegion(filters)
  const field = (id: RegionField, title: string, example: string) => (
    <TypedField
      key={id}
      title={title}
      example={example}
      figures
      value={filters[id] ?? ''}
      problemOf={(text) => (text.trim() === (filters[id] ?? '').trim() ? problems[id] : undefined)}
      onChange={(text) => onChange(id, text)}
    />
  )
  return (
    <fieldset className="flex min-w-0 shrink-0 flex-wrap gap-3 md:w-[22rem] md:flex-nowrap md:border-l md:border-line md:pl-5">
      <legend className="sr-only">Region of the sky</legend>
      <div className="grid min-w-0 flex-1 grid-cols-2 content-start gap-x-3 gap-y-2.5">
        <div className="col-span-2">{field('near', 'Round the position, ICRS', '150.1 2.2 or 10:00:24 +02:12:00')}</div>
        <div className="col-span-2">{field('within', 'Within', '30 arcsec, 5 arcmin, 0.5 deg')}</div>
        {(['ra', 'dec'] as const).map((axis) => {
          const column = columns.find(({ id }) => id === axis)
          return column ? (
            <div key={axis} className="col-span-2">
              <FilterField column={column} value={filters[axis] ?? ''} onChange={onChange} />
            </div>
          ) : null
        })}
      </div>
      <RegionPlot positions={positions} cone={cone} ra={filters.ra ?? ''} dec={filters.dec ?? ''} />
    </fieldset>
  )
}
