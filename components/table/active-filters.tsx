import { X } from 'lucide-react'
import { readFilter } from './read-filter'
import { readRegion, REGION_FIELDS } from './sky-region'
import type { TableColumn } from './table-column'
import { ToolButton } from './tool-button'

interface ActiveFiltersProps<Row> {
  columns: readonly TableColumn<Row>[]
  filters: Readonly<Record<string, string>>
  onTakeOff: (id: string) => void
  onClear: () => void
}

const REGION_WORDS = { near: 'Round', within: 'Within' } as const

/** What narrows the table, each with a button that takes it off; nothing where nothing does. */
export function ActiveFilters<Row>({ columns, filters, onTakeOff, onClear }: ActiveFiltersProps<Row>) {
  const { problems } = readRegion(filters)
  const active = [
    ...columns.flatMap((column) => {
      const text = filters[column.id]
      const read = column.filter && text ? readFilter(column.filter, text) : null
      if (!column.filter || !text) return []
      const words = typeof column.filter === 'object' ? text.split(',').join(' or ') : text
      return [{ id: column.id, name: column.label, words, works: read !== null && 'condition' in read }]
    }),
    ...REGION_FIELDS.flatMap((id) =>
      filters[id] ? [{ id, name: REGION_WORDS[id], words: filters[id], works: !problems[id] }] : [],
    ),
  ]
  if (active.length === 0) return null
  return (
    <ul aria-label="Filters that are set" className="flex flex-wrap items-center gap-1.5">
      {active.map(({ id, name, words, works }) => (
        <li key={id}>
          <button
            type="button"
            onClick={() => onTakeOff(id)}
            aria-label={`Take off the filter ${name} ${words}${works ? '' : ', which cannot be read'}`}
            className={`inline-flex min-h-7 max-w-72 items-center gap-1.5 rounded-full border px-2.5 text-note hover:border-text max-md:min-h-11 ${works ? 'border-edge/60' : 'border-alarm text-alarm'}`}
          >
            <span className={works ? 'text-mute' : ''}>{name}</span>
            <span className="figures truncate">{works ? words : `${words} ?`}</span>
            <X size={12} aria-hidden="true" className="shrink-0 text-mute" />
          </button>
        </li>
      ))}
      <li>
        <ToolButton
          className="min-h-7 border-transparent underline underline-offset-4 max-md:min-h-11"
          onClick={onClear}
        >
          Clear filters
        </ToolButton>
      </li>
    </ul>
  )
}
