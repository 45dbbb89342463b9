'use client'

import { useId, useState } from 'react'
import { numberIn } from './redshift-draft'
import { inField } from './in-figures'

const BUTTON =
  'grid min-h-8 min-w-8 place-items-center border-edge bg-raise text-body font-semibold hover:bg-line disabled:opacity-40 pointer-coarse:min-h-11 pointer-coarse:min-w-11'

/**
 * A number with a button on each side for a thumb; arrow keys in the field do the same, ten steps with Shift. What is typed counts once
 * it is a number within bounds, and stays as it is typed until the field is left; what was not taken is told then.
 */
export function NumberStepper({
  label,
  value,
  unit = '',
  step,
  decimals,
  low,
  high,
  round = false,
  onChange,
}: {
  label: string
  value: number
  unit?: string
  step: number
  decimals: number
  low: number
  high: number
  /** An angle that goes on from the other end. */
  round?: boolean
  onChange: (value: number) => void
}) {
  const id = useId()
  const [typed, setTyped] = useState<string | null>(null)
  const [refused, setRefused] = useState<string | null>(null)
  const number = typed === null ? value : numberIn(typed)
  const fault = typed !== null && !(number >= low && number <= high)
  const stepBy = (steps: number) => {
    const next = value + steps * step
    setTyped(null)
    setRefused(null)
    onChange(
      round
        ? low + ((((next - low) % (high - low)) + (high - low)) % (high - low))
        : Math.min(high, Math.max(low, next)),
    )
  }
  return (
    <div className="flex min-w-0 flex-col gap-0.5">
      <label htmlFor={id} className="text-note text-mute">
        {label}
        {unit ? `, ${unit}` : ''}
      </label>
      <div className="flex">
        <button
          type="button"
          aria-label={`${label}: less`}
          onClick={() => stepBy(-1)}
          className={`rounded-l-control border ${BUTTON}`}
        >
          −
        </button>
        <input
          id={id}
          inputMode="decimal"
          autoComplete="off"
          aria-invalid={fault || undefined}
          aria-describedby={fault ? `${id}-fault` : undefined}
          value={typed ?? inField(value, decimals)}
          onChange={(event) => {
            setTyped(event.target.value)
            setRefused(null)
            const now = numberIn(event.target.value)
            if (now >= low && now <= high) onChange(now)
          }}
          onBlur={() => {
            if (fault) setRefused(typed)
            setTyped(null)
          }}
          onKeyDown={(event) => {
            const sense = event.key === 'ArrowUp' ? 1 : event.key === 'ArrowDown' ? -1 : 0
            if (sense === 0) return
            event.preventDefault()
            stepBy(sense * (event.shiftKey ? 10 : 1))
          }}
          className="figures w-full min-w-0 border-y border-edge bg-well px-1.5 text-center text-small aria-invalid:border-alarm"
        />
        <button
          type="button"
          aria-label={`${label}: more`}
          onClick={() => stepBy(1)}
          className={`rounded-r-control border ${BUTTON}`}
        >
          +
        </button>
      </div>
      {fault ? (
        <p id={`${id}-fault`} className="text-note text-alarm">
          A number from {low} to {high}.
        </p>
      ) : refused !== null ? (
        <p role="status" className="text-note text-mute [overflow-wrap:anywhere]">
          ‘{refused}’ was not taken: a number from {low} to {high}.
        </p>
      ) : null}
    </div>
  )
}
