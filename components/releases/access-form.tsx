'use client'

import { useState } from 'react'
import { FormNote } from '@/components/people/form-note'
import { useKeptForm, type FormAction } from '@/components/people/use-kept-form'
import { CopyButton } from '@/components/table/copy-text'
import { Button } from '@/components/ui/button'
import type { ReleaseAccess } from '@/db/schema/releases'
import { ACCESS_IN_WORDS } from './words'

const CHOICES: readonly ReleaseAccess[] = ['private', 'link', 'public']

/** Who may read a release. Every change is kept, and it can be changed again. */
export function AccessForm({
  number,
  acronym,
  access,
  asksForAcronym,
  action,
}: {
  number: number
  acronym: string
  access: ReleaseAccess
  asksForAcronym: boolean
  action: FormAction
}) {
  const { state, pending, formProps } = useKeptForm(action)
  const [wanted, setWanted] = useState(access)
  const link = state.values?.link
  const isSame = wanted === access && wanted !== 'link'
  return (
    <form {...formProps} className="flex max-w-2xl flex-col gap-3">
      <fieldset className="flex flex-col gap-2">
        <legend className="mb-1 text-small font-semibold">Who may read release {number}</legend>
        {CHOICES.map((choice) => (
          <label key={choice} className="flex min-h-6 items-start gap-2.5 text-small">
            <input
              type="radio"
              name="access"
              value={choice}
              checked={wanted === choice}
              onChange={() => setWanted(choice)}
              className="mt-0.5 size-4 shrink-0 accent-(--lamp)"
            />
            <span>
              {ACCESS_IN_WORDS[choice].label}
              <span className="text-mute">. {ACCESS_IN_WORDS[choice].meaning}</span>
            </span>
          </label>
        ))}
      </fieldset>
      {wanted === 'public' && access !== 'public' && asksForAcronym ? (
        <label className="flex min-h-6 items-start gap-2.5 text-small">
          <input type="checkbox" name="acronymRegistered" className="mt-0.5 size-4 shrink-0 accent-(--lamp)" />
          <span>
            The acronym {acronym} is registered.
            <span className="text-mute">
              {' '}
              By the IAU rule it must be before designations made with it are published; Ringside does not register it.
            </span>
          </span>
        </label>
      ) : null}
      <FormNote state={state} />
      {link ? (
        <p className="flex items-start gap-2 text-small">
          <span className="figures break-all">{link}</span>
          <CopyButton text={link} what="link" />
        </p>
      ) : null}
      {isSame ? null : (
        <Button type="submit" disabled={pending} className="self-start">
          {wanted === 'link' ? (access === 'link' ? 'Make a new link' : 'Make a link') : `Make it ${wanted}`}
        </Button>
      )}
    </form>
  )
}
