'use client'

import { signIn, signOut } from 'next-auth/react'
import type { FormState } from '@/components/ui/form-state'
import { FormNote } from '@/components/people/form-note'
import { PasswordField } from '@/components/people/password-field'
import { useKeptForm, type FormAction } from '@/components/people/use-kept-form'
import { Button } from '@/components/ui/button'
import { TextField } from '@/components/ui/field'
import { enterWith } from './enter-with'

/** For an address without an account: name and password, then straight into the campaign. */
export function NewPersonForm({
  action,
  email,
  campaignPath,
  passwordHint,
}: {
  action: FormAction
  email: string
  campaignPath: string
  passwordHint: string
}) {
  const { state, pending, formProps } = useKeptForm(async (before, form): Promise<FormState> => {
    const after = await action(before, form)
    if (!after.done) return after
    await signIn('credentials', { email, password: String(form.get('password') ?? ''), redirect: false })
    enterWith(campaignPath)
    return after
  })
  return (
    <form {...formProps} className="flex max-w-sm flex-col gap-4" aria-label="Accept the invitation">
      <FormNote state={state} />
      <TextField label="E-mail" type="email" name="email" autoComplete="username" value={email} readOnly />
      <TextField
        label="Your name"
        name="name"
        autoComplete="name"
        hint="As the others in the campaign will see it. In published files a pseudonym stands for you."
        error={state.errors?.name}
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
        {pending ? 'Joining…' : 'Join the campaign'}
      </Button>
    </form>
  )
}

/** For the person with the invited address who is signed in. */
export function AcceptForm({ action }: { action: FormAction }) {
  const { state, pending, formProps } = useKeptForm(action)
  return (
    <form {...formProps} className="flex max-w-sm flex-col gap-4" aria-label="Accept the invitation">
      <FormNote state={state} />
      <Button tone="lamp" type="submit" disabled={pending} className="self-start px-6">
        {pending ? 'Joining…' : 'Accept and open the campaign'}
      </Button>
    </form>
  )
}

/** Signs out and comes back here, for whoever is signed in with another address. */
export function SwitchAccountButton({ returnTo }: { returnTo: string }) {
  return (
    <Button
      tone="lamp"
      className="self-start px-6"
      onClick={() => void signOut({ callbackUrl: `/signin?next=${encodeURIComponent(returnTo)}` })}
    >
      Sign out and change account
    </Button>
  )
}
