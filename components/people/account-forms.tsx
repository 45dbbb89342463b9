'use client'

import { signIn } from 'next-auth/react'
import type { FormState } from '@/components/ui/form-state'
import { Button } from '@/components/ui/button'
import { TextField } from '@/components/ui/field'
import { enterWith } from '@/components/welcome/enter-with'
import { FormNote } from './form-note'
import { PasswordField } from './password-field'
import { useKeptForm, type FormAction } from './use-kept-form'

export function NameForm({ name, action }: { name: string; action: FormAction }) {
  const { state, pending, formProps } = useKeptForm(action)
  return (
    <form {...formProps} className="flex max-w-sm flex-col gap-4" aria-label="Your name">
      <TextField label="Name" name="name" autoComplete="name" defaultValue={name} error={state.errors?.name} required />
      <FormNote state={state} />
      <Button type="submit" disabled={pending} className="self-start">
        Save the name
      </Button>
    </form>
  )
}

/** The change ends every session, so this browser signs in again at once with the new password. */
export function PasswordForm({ email, action, hint }: { email: string; action: FormAction; hint: string }) {
  const { state, pending, formProps } = useKeptForm(
    async (before, form): Promise<FormState> => {
      const after = await action(before, form)
      if (!after.done) return after
      const password = String(form.get('newPassword') ?? '')
      const result = await signIn('credentials', { email, password, redirect: false })
      if (!result?.ok) enterWith('/signin')
      return after
    },
    { emptyWhenDone: true },
  )
  return (
    <form {...formProps} className="flex max-w-sm flex-col gap-4" aria-label="Your password">
      {/* Password managers file the new password under this. */}
      <input type="hidden" name="username" autoComplete="username" value={email} readOnly />
      <PasswordField
        label="Present password"
        name="currentPassword"
        autoComplete="current-password"
        error={state.errors?.currentPassword}
      />
      <PasswordField
        label="New password"
        name="newPassword"
        autoComplete="new-password"
        hint={hint}
        error={state.errors?.newPassword}
      />
      <FormNote state={state} />
      <Button type="submit" disabled={pending} className="self-start">
        Change the password
      </Button>
    </form>
  )
}
