'use client'

import { useId } from 'react'

/** One of a few, as a row of keys; the arrow keys go through them. */
export function Choice<T extends string>({
  label,
  options,
  value,
  onChange,
}: {
  label: string
  options: readonly (readonly [T, string])[]
  value: T
  onChange: (value: T) => void
}) {
  const name = useId()
  return (
    <fieldset className="min-w-0">
      <legend className="pb-0.5 text-note text-mute">{label}</legend>
      <div className="flex flex-wrap gap-1">
        {options.map(([one, text]) => (
          <label
            key={one}
            className="relative inline-flex min-h-8 items-center rounded-control border border-edge/50 bg-raise px-2.5 text-note has-checked:border-lamp has-checked:font-semibold has-checked:text-text has-focus-visible:outline-2 has-focus-visible:outline-offset-2 has-focus-visible:outline-text pointer-coarse:min-h-11"
          >
            <input
              type="radio"
              name={name}
              className="sr-only"
              checked={one === value}
              onChange={() => onChange(one)}
            />
            {text}
          </label>
        ))}
      </div>
    </fieldset>
  )
}
