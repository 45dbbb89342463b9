import { useId, type ComponentProps, type ReactNode } from 'react'

const CONTROL =
  'w-full min-h-9 rounded-control border border-edge bg-well px-3 py-1.5 text-body text-text placeholder:text-mute aria-invalid:border-alarm'

interface Labelled {
  label: string
  hint?: ReactNode
  /** What is wrong with the value and what to do. */
  error?: string
}

function Frame({ id, label, hint, error, children }: Labelled & { id: string; children: ReactNode }) {
  return (
    <div className="flex flex-col gap-1">
      <label htmlFor={id} className="text-small font-semibold">
        {label}
      </label>
      {children}
      {hint ? (
        <p id={`${id}-hint`} className="text-note text-mute">
          {hint}
        </p>
      ) : null}
      {error ? (
        <p id={`${id}-error`} className="text-note text-alarm">
          {error}
        </p>
      ) : null}
    </div>
  )
}

function describe(id: string, hint: ReactNode, error?: string) {
  const ids = [hint ? `${id}-hint` : '', error ? `${id}-error` : ''].filter(Boolean).join(' ')
  return { 'aria-describedby': ids || undefined, 'aria-invalid': error ? true : undefined }
}

export function TextField({ label, hint, error, className = '', ...rest }: Labelled & ComponentProps<'input'>) {
  const id = useId()
  return (
    <Frame id={id} label={label} hint={hint} error={error}>
      <input id={id} className={`${CONTROL} ${className}`} {...describe(id, hint, error)} {...rest} />
    </Frame>
  )
}

export function TextArea({ label, hint, error, className = '', ...rest }: Labelled & ComponentProps<'textarea'>) {
  const id = useId()
  return (
    <Frame id={id} label={label} hint={hint} error={error}>
      <textarea id={id} className={`${CONTROL} ${className}`} {...describe(id, hint, error)} {...rest} />
    </Frame>
  )
}
