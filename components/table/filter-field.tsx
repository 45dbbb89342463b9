'use client'

import { useEffect, useId, useState, type ReactNode } from 'react'
import { readFilter } from './read-filter'
import type { ColumnFilterKind, TableColumn } from './table-column'
import { chosenOf } from './table-state'

/** Typing is over when nothing was typed for this long. */
const PAUSE_MS = 300

const BOX =
  'h-8 w-full min-w-0 rounded-key border border-edge/50 bg-well px-2 text-small text-text placeholder:text-mute aria-invalid:border-alarm max-md:h-11 max-md:text-body'

const EXAMPLE: Record<Exclude<ColumnFilterKind, readonly string[]>, string> = {
  text: 'contains',
  range: '>= 2, 1..3',
  date: '2026-11',
  ra: '150..151',
  dec: '-2..2',
}

interface FilterFieldProps<Row> {
  column: TableColumn<Row>
  value: string
  onChange: (id: string, text: string) => void
}

/** What narrows one column. */
export function FilterField<Row>({ column, value, onChange }: FilterFieldProps<Row>) {
  const { id, filter } = column
  const title = column.filterTitle ?? column.title ?? column.label
  if (filter === undefined) return null
  if (typeof filter === 'object') {
    const chosen = chosenOf(value)
    const toggle = (choice: string) => {
      const wanted = filter.filter((one) => (one === choice ? !chosen.includes(one) : chosen.includes(one)))
      onChange(id, wanted.join(','))
    }
    return (
      <fieldset className="flex min-w-0 flex-col gap-0.5">
        <legend className="pb-0.5 text-note text-mute">{title}</legend>
        <div className="flex flex-wrap gap-1">
          {filter.map((choice) => (
            <button
              key={choice}
              type="button"
              aria-pressed={chosen.includes(choice)}
              onClick={() => toggle(choice)}
              className="h-8 min-w-8 shrink-0 whitespace-nowrap rounded-key border border-edge/50 px-2 text-note text-mute hover:text-text aria-pressed:border-text aria-pressed:bg-raise aria-pressed:text-text max-md:h-11 max-md:min-w-11 max-md:px-3 max-md:text-small"
            >
              {choice}
            </button>
          ))}
        </div>
      </fieldset>
    )
  }
  const read = readFilter(filter, value)
  return (
    <TypedField
      title={title}
      example={EXAMPLE[filter]}
      figures={filter !== 'text'}
      value={value}
      problemOf={(text) => {
        const now = text === value ? read : readFilter(filter, text)
        return now && 'problem' in now ? now.problem : undefined
      }}
      onChange={(text) => onChange(id, text)}
    />
  )
}

interface TypedFieldProps {
  title: string
  example: string
  figures?: boolean
  value: string
  problemOf: (text: string) => string | undefined
  onChange: (text: string) => void
  hint?: ReactNode
}

/** A text field that tells what was typed after a pause, and at once when it is left or Enter is pressed. */
export function TypedField({ title, example, figures = false, value, problemOf, onChange, hint }: TypedFieldProps) {
  const id = useId()
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
  const settle = () => {
    if (text === taken) return
    setTaken(text)
    onChange(text)
  }
  // While somebody is still typing half a range is no fault yet.
  const problem = text === taken ? problemOf(text) : undefined
  return (
    <div className="flex min-w-0 flex-col gap-0.5">
      <label htmlFor={id} className="truncate text-note text-mute" title={title}>
        {title}
      </label>
      <input
        id={id}
        type="text"
        inputMode="text"
        autoComplete="off"
        spellCheck={false}
        aria-invalid={problem ? true : undefined}
        aria-describedby={problem ? `${id}-problem` : undefined}
        placeholder={example}
        value={text}
        onChange={(event) => setText(event.target.value)}
        onBlur={settle}
        onKeyDown={(event) => event.key === 'Enter' && settle()}
        className={`${BOX} ${figures ? 'figures' : ''}`}
      />
      {problem ? (
        <p id={`${id}-problem`} role="alert" className="text-note text-alarm">
          {problem}
        </p>
      ) : (
        hint
      )}
    </div>
  )
}
