'use client'

import { signIn } from 'next-auth/react'
import type { FormState } from '@/components/ui/form-state'
import { FormNote } from '@/components/people/form-note'
import { PasswordField } from '@/components/people/password-field'
import { useKeptForm, type FormAction } from '@/components/people/use-kept-form'
import { Button } from '@/components/ui/button'
import { TextField } from '@/components/ui/field'
import { enterWith } from './enter-with'

/** The first visit: makes the administrator and signs them in. */
export function AdministratorForm({ action, passwordHint }: { action: FormAction; passwordHint: string }) {
  const { state, pending, formProps } = useKeptForm(async (before, form): Promise<FormState> => {
    const after = await action(before, form)
    if (!after.done) return after
    const email = String(form.get('email') ?? '').trim()
    await signIn('credentials', { email, password: String(form.get('password') ?? ''), redirect: false })
    enterWith('/')
    return after
  })
  return (
    <form {...formProps} className="flex max-w-sm flex-col gap-4" aria-label="Make the administrator">
      <FormNote state={state} />
      <TextField
        label="One-time code"
        name="code"
        className="figures uppercase placeholder:normal-case"
        autoComplete="one-time-code"
        autoCapitalize="characters"
        spellCheck={false}
        hint="The server printed it when it started, in the line that begins with ‘First visit’. It works once."
        error={state.errors?.code}
        required
      />
      <TextField
        label="Your name"
        name="name"
        autoComplete="name"
        hint="As the others in your campaigns know you."
        error={state.errors?.name}
        required
      />
      <TextField
        label="E-mail"
        name="email"
        type="email"
        autoComplete="username"
        autoCapitalize="none"
        spellCheck={false}
        error={state.errors?.email}
        required
      />
      <PasswordField
        label="Password"
        name="password"
        autoComplete="new-password"
        hint={passwordHint}
        error={state.errors?.password}
      />
      <Button tone="lamp" type="submit" disabled={pending} className="self-start px-6">
        {pending ? 'Making the account…' : 'Make the administrator'}
      </Button>
    </form>
  )
}
