'use client'

import { unstable_rethrow } from 'next/navigation'
import { startTransition, useActionState, useEffect, useRef, type FormEvent } from 'react'
import type { FormState } from '@/components/ui/form-state'

export type FormAction = (state: FormState, form: FormData) => Promise<FormState>

/**
 * A form that keeps what was typed, passwords too, until it has gone through: React empties a form after each action, so the
 * submit is taken by hand. (`action` stays for a press of the button before the page is ready.) The first field with a fault
 * gets the focus.
 */
export function useKeptForm(action: FormAction, { emptyWhenDone = false } = {}) {
  const form = useRef<HTMLFormElement>(null)
  const [state, submit, pending] = useActionState(async (before: FormState, data: FormData): Promise<FormState> => {
    try {
      const after = await action(before, data)
      if (after.done && emptyWhenDone) form.current?.reset()
      return after
    } catch (error) {
      unstable_rethrow(error)
      return { message: 'The server did not answer. What you typed is still here; try again in a moment.' }
    }
  }, {})

  useEffect(() => {
    if (state.errors) form.current?.querySelector<HTMLElement>('[aria-invalid="true"]')?.focus()
  }, [state])

  const onSubmit = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault()
    const data = new FormData(event.currentTarget)
    startTransition(() => submit(data))
  }
  return { state, pending, formProps: { ref: form, action: submit, onSubmit, noValidate: true } }
}
