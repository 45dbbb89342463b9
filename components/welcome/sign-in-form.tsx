'use client'

import { signIn } from 'next-auth/react'
import type { FormState } from '@/components/ui/form-state'
import { PasswordField } from '@/components/people/password-field'
import { FormNote } from '@/components/people/form-note'
import { useKeptForm } from '@/components/people/use-kept-form'
import { Button } from '@/components/ui/button'
import { TextField } from '@/components/ui/field'
import { enterWith } from './enter-with'

const WRONG =
  'No account has this address and password together. Check both; capitals count in the password, not in the address.'

/** `next` is a path of this site: the page has made sure. */
export function SignInForm({ next, email, goTo }: { next: string; email?: string; goTo?: (path: string) => void }) {
  const { state, pending, formProps } = useKeptForm(async (_before, form): Promise<FormState> => {
    const address = String(form.get('email') ?? '').trim()
    const password = String(form.get('password') ?? '')
    if (!address) return { errors: { email: 'Enter the e-mail address of your account.' } }
    if (!password) return { errors: { password: 'Enter your password.' } }
    const result = await signIn('credentials', { email: address, password, redirect: false })
    if (!result?.ok) return { message: result?.error?.startsWith('Too many') ? result.error : WRONG }
    enterWith(next, goTo)
    return { done: 'Signed in.' }
  })
  return (
    <form {...formProps} className="flex max-w-sm flex-col gap-4" aria-label="Sign in">
      <FormNote state={state} />
      <TextField
        label="E-mail"
        name="email"
        type="email"
        autoComplete="username"
        autoCapitalize="none"
        spellCheck={false}
        defaultValue={email}
        error={state.errors?.email}
        required
      />
      <PasswordField label="Password" name="password" autoComplete="current-password" error={state.errors?.password} />
      <Button tone="lamp" type="submit" disabled={pending} className="self-start px-6">
        {pending ? 'Signing in…' : 'Sign in'}
      </Button>
    </form>
  )
}
