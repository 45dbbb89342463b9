'use client'

import { useState } from 'react'
import { TextField } from '@/components/ui/field'

/** A password with a way to see it: what can be read is typed right the first time. */
export function PasswordField({
  label,
  name,
  autoComplete,
  hint,
  error,
}: {
  label: string
  name: string
  autoComplete: 'current-password' | 'new-password'
  hint?: string
  error?: string
}) {
  const [visible, setVisible] = useState(false)
  return (
    <div className="relative">
      <TextField
        label={label}
        name={name}
        type={visible ? 'text' : 'password'}
        autoComplete={autoComplete}
        autoCapitalize="none"
        spellCheck={false}
        hint={hint}
        error={error}
        required
      />
      <button
        type="button"
        aria-label={visible ? 'Hide what is typed' : 'Show what is typed'}
        onClick={() => setVisible(!visible)}
        className="absolute right-0 top-0 min-h-6 px-1 text-note text-mute underline decoration-line underline-offset-4 hover:text-text"
      >
        {visible ? 'Hide' : 'Show'}
      </button>
    </div>
  )
}
