import { unstable_rethrow } from 'next/navigation'
import { z } from 'zod'
import type { FormState } from '@/components/ui/form-state'
import { log } from '@/lib/platform/log'
import { Problem } from '@/lib/platform/problems/problem'

export type { FormState }

function textValues(form: FormData): Record<string, string> {
  const values: Record<string, string> = {}
  // Passwords never travel back into the page.
  for (const [name, value] of form) if (typeof value === 'string' && !/password/i.test(name)) values[name] = value
  return values
}

/** Turns what a use case or a zod schema threw into the state of the form. Redirects pass through. */
export function failedForm(error: unknown, form: FormData): FormState {
  unstable_rethrow(error)
  const values = textValues(form)
  if (error instanceof z.ZodError) {
    const errors: Record<string, string> = {}
    for (const issue of error.issues) errors[String(issue.path[0] ?? 'form')] ??= issue.message
    return { message: 'Nothing was saved yet: see the marked fields.', errors, values }
  }
  if (error instanceof Problem) {
    const errors = Object.fromEntries(error.invalidParameters.map(({ name, reason }) => [name, reason]))
    return { message: error.message, errors, values }
  }
  log.error({ err: error }, 'form action failed')
  return { message: 'Something went wrong on the server and nothing was changed. Try again.', values }
}
