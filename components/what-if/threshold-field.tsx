'use client'

import { useId, useState } from 'react'
import { nearestStop, type Threshold } from './thresholds'

/** A thin line and a round handle, the same in every browser; the whole height takes the finger. */
const SLIDER = [
  'relative h-8 w-full touch-none cursor-pointer appearance-none rounded-key bg-transparent md:h-6',
  '[&::-webkit-slider-runnable-track]:h-0.5 [&::-webkit-slider-runnable-track]:bg-edge',
  '[&::-webkit-slider-thumb]:-mt-[9px] [&::-webkit-slider-thumb]:size-5 [&::-webkit-slider-thumb]:appearance-none',
  '[&::-webkit-slider-thumb]:rounded-full [&::-webkit-slider-thumb]:bg-lamp',
  'md:[&::-webkit-slider-thumb]:-mt-[7px] md:[&::-webkit-slider-thumb]:size-4',
  '[&::-moz-range-track]:h-0.5 [&::-moz-range-track]:bg-edge [&::-moz-range-thumb]:size-4',
  '[&::-moz-range-thumb]:border-0 [&::-moz-range-thumb]:bg-lamp',
].join(' ')

const numberOf = (text: string) => (text.trim() === '' ? NaN : Number(text.trim().replace(',', '.')))

/** One threshold: a slider, a field for an exact value, and a tick where the rule in force has it. */
export function ThresholdField({
  threshold,
  value,
  inForce,
  onChange,
}: {
  threshold: Threshold
  value: number
  /** null where the rule in force is of the other method */
  inForce: number | null
  onChange: (value: number) => void
}) {
  const id = useId()
  const { label, unit, hint, stops, inWords } = threshold
  /** What is being typed, until the field is left with a number in it. */
  const [typed, setTyped] = useState<string | null>(null)
  const last = stops.length - 1
  const words = inWords?.(value)
  const place = (at: number) => `calc(0.5rem + ${at / last} * (100% - 1rem))`
  const wrong = typed !== null && !Number.isFinite(numberOf(typed))
  return (
    <div className="flex flex-col">
      <div className="flex items-baseline justify-between gap-3">
        <label htmlFor={id} className="text-small font-semibold">
          {label}
        </label>
        <span className="flex items-baseline gap-1.5">
          {words ? <span className="whitespace-nowrap text-note text-mute">{words}</span> : null}
          <input
            aria-label={`${label}, ${unit}`}
            aria-invalid={wrong || undefined}
            inputMode="decimal"
            autoComplete="off"
            value={typed ?? String(value)}
            onChange={(event) => {
              setTyped(event.target.value)
              const number = numberOf(event.target.value)
              if (Number.isFinite(number)) onChange(number)
            }}
            aria-describedby={wrong ? `${id}-wrong` : undefined}
            onBlur={() => (wrong ? undefined : setTyped(null))}
            className="figures w-20 rounded-control border border-edge/60 bg-well px-2 py-0.5 text-right text-small aria-invalid:border-alarm"
          />
        </span>
      </div>
      <div className="relative">
        {inForce === null ? null : (
          <i
            aria-hidden="true"
            title={`${inForce} in the rule in force`}
            className="absolute top-1/2 h-3.5 w-0.5 -translate-x-1/2 -translate-y-1/2 bg-text"
            style={{ left: place(nearestStop(stops, inForce)) }}
          />
        )}
        <input
          id={id}
          type="range"
          min={0}
          max={last}
          value={nearestStop(stops, value)}
          aria-valuetext={words ? `${value}, ${words}` : `${value} ${unit}`}
          aria-describedby={`${id}-hint`}
          onChange={(event) => {
            setTyped(null)
            onChange(stops[Number(event.target.value)])
          }}
          className={SLIDER}
        />
      </div>
      {wrong ? (
        <p id={`${id}-wrong`} role="alert" className="text-note text-alarm">
          {typed?.trim() ? `‘${typed.trim()}’ is not a number` : 'A number is missing'}: the threshold stays at {value}.
        </p>
      ) : null}
      <p id={`${id}-hint`} className="text-note text-mute">
        {hint}
        {inForce !== null && inForce !== value ? <span> In force: {inForce}.</span> : null}
      </p>
    </div>
  )
}
