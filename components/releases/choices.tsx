import { useId } from 'react'

/** One of several, with a sentence that says what it means. */
export function Choice({
  name,
  value,
  label,
  meaning,
  checked,
  onChange,
}: {
  name: string
  value: string
  label: string
  meaning: string
  checked: boolean
  onChange: () => void
}) {
  const id = useId()
  return (
    <label className="flex min-h-6 cursor-pointer items-start gap-2.5">
      <input
        type="radio"
        name={name}
        value={value}
        checked={checked}
        onChange={onChange}
        aria-label={label}
        aria-describedby={id}
        className="mt-1 size-4 shrink-0 accent-(--lamp)"
      />
      <span>
        {label}
        <span id={id} className="block text-note text-mute">
          {meaning}
        </span>
      </span>
    </label>
  )
}

/** A box to tick, without which it does not go on. */
export function Tick({ name, label, error }: { name: string; label: string; error?: string }) {
  const id = useId()
  return (
    <div className="flex flex-col gap-1">
      <label className="flex min-h-6 cursor-pointer items-start gap-2.5">
        <input
          type="checkbox"
          name={name}
          aria-invalid={error ? true : undefined}
          aria-describedby={error ? id : undefined}
          className="mt-1 size-4 shrink-0 outline-offset-2 outline-alarm accent-(--lamp) aria-invalid:outline-2"
        />
        {label}
      </label>
      {error ? (
        <p id={id} className="text-note text-alarm">
          {error}
        </p>
      ) : null}
    </div>
  )
}
