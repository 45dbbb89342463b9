'use client'

import { useEffect, useState } from 'react'
import { parseNumberRange } from './number-range'
import type { TableColumn } from './table-column'
import { chosenOf } from './table-state'

/** Typing is over when nothing was typed for this long. */
const PAUSE_MS = 250

const BOX =
  'h-7 w-full min-w-12 rounded-key border border-edge/50 bg-well px-1.5 text-note font-normal text-text placeholder:text-mute aria-invalid:border-alarm'

interface FilterFieldProps<Row> {
  column: TableColumn<Row>
  value: string
  onChange: (id: string, text: string) => void
}

/** What narrows one column, below its head. */
export function FilterField<Row>({ column, value, onChange }: FilterFieldProps<Row>) {
  const name = `Filter by ${(column.title ?? column.label).toLowerCase()}`
  if (typeof column.filter === 'object') {
    const chosen = chosenOf(value)
    const toggle = (choice: string) => {
      const next = column.filter as readonly string[]
      const wanted = next.filter((one) => (one === choice ? !chosen.includes(one) : chosen.includes(one)))
      onChange(column.id, wanted.join(','))
    }
    return (
      // Above the next cells, below the pinned column.
      <span role="group" aria-label={name} className={`relative z-1 flex gap-1 ${column.filterSpills ? 'w-0' : ''}`}>
        {column.filter.map((choice) => (
          <button
            key={choice}
            type="button"
            aria-pressed={chosen.includes(choice)}
            onClick={() => toggle(choice)}
            className="h-7 min-w-6 shrink-0 whitespace-nowrap rounded-key border border-edge/50 px-1.5 text-note text-mute hover:text-text aria-pressed:border-text aria-pressed:bg-raise aria-pressed:text-text"
          >
            {choice}
          </button>
        ))}
      </span>
    )
  }
  return (
    <TypedFilter
      name={name}
      range={column.filter === 'range'}
      value={value}
      onChange={(text) => onChange(column.id, text)}
    />
  )
}

interface TypedFilterProps {
  name: string
  range: boolean
  value: string
  onChange: (text: string) => void
}

function TypedFilter({ name, range, value, onChange }: TypedFilterProps) {
  const [text, setText] = useState(value)
  const [taken, setTaken] = useState(value)
  // Cleared or changed from outside.
  if (value !== taken) {
    setTaken(value)
    setText(value)
  }
  useEffect(() => {
    if (text === taken) return
    const timer = setTimeout(() => {
      setTaken(text)
      onChange(text)
    }, PAUSE_MS)
    return () => clearTimeout(timer)
  }, [text, taken, onChange])
  const unclear = range && text.trim() !== '' && parseNumberRange(text) === null
  return (
    <input
      type="text"
      aria-label={name}
      aria-invalid={unclear || undefined}
      title={range ? 'A number, or a range such as 2..3, >2 or <=3' : undefined}
      placeholder={range ? '2..3' : 'contains'}
      value={text}
      onChange={(event) => setText(event.target.value)}
      className={`${BOX} ${range ? 'figures text-right' : ''}`}
    />
  )
}
