import { useId, useState } from 'react'
import { PLACES, placeOf, valueAt } from './limit-scales'

/** A number by slider and by typing. What is typed stays as typed; a slider beyond whose end it lies stands at its end. */
export function FigureField({
  label,
  hint,
  unit,
  value,
  scale,
  error,
  onChange,
}: {
  label: string
  hint?: string
  unit: string
  value: number
  scale: { least: number; most: number; log?: boolean; digits: number }
  error?: string
  onChange: (value: number) => void
}) {
  const id = useId()
  const [typed, setTyped] = useState<string | null>(null)
  const take = (text: string) => {
    setTyped(text)
    const number = numberOf(text)
    if (Number.isFinite(number)) onChange(number)
  }
  // What was typed is shown as typed, such as 1.50, until the number is changed from elsewhere.
  const stands = typed !== null && (Number.isNaN(numberOf(typed)) || numberOf(typed) === value)
  const notes = [hint ? `${id}-hint` : '', error ? `${id}-error` : ''].filter(Boolean).join(' ') || undefined
  return (
    <div className="grid grid-cols-[6.5rem_minmax(0,1fr)_5.5rem] items-center gap-x-3">
      <label htmlFor={id} className="text-small" title={hint}>
        {label}
      </label>
      <input
        type="range"
        aria-label={`${label}, slider`}
        min={0}
        max={PLACES}
        value={placeOf(value, scale)}
        aria-valuetext={`${value} ${unit}`}
        onChange={(event) => {
          setTyped(null)
          onChange(valueAt(Number(event.target.value), scale))
        }}
        className="min-h-6 w-full accent-lamp pointer-coarse:min-h-11"
      />
      <span className="flex items-center gap-1.5">
        <input
          id={id}
          inputMode="decimal"
          value={stands ? typed : String(value)}
          onChange={(event) => take(event.target.value)}
          onBlur={() => setTyped(null)}
          aria-invalid={error ? true : undefined}
          aria-describedby={notes}
          className="figures min-h-8 w-full pointer-coarse:min-h-11 rounded-control border border-edge bg-well px-2 text-small aria-invalid:border-alarm"
        />
        <span className="w-4 text-note text-mute">{unit}</span>
      </span>
      {hint ? (
        <span id={`${id}-hint`} className="sr-only">
          {hint}
        </span>
      ) : null}
      {error ? (
        <p id={`${id}-error`} className="col-span-3 text-note text-alarm">
          {error}
        </p>
      ) : null}
    </div>
  )
}

const numberOf = (text: string): number => (text.trim() === '' ? Number.NaN : Number(text.trim().replace(',', '.')))
