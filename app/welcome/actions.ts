'use server'

import { failedForm, type FormState } from '@/app/_lib/form-state'
import { database } from '@/lib/platform/database'
import { AdministratorInput, makeAdministrator } from '@/lib/work/people/make-administrator'

export async function makeAdministratorAction(_before: FormState, form: FormData): Promise<FormState> {
  try {
    await makeAdministrator(await database(), AdministratorInput.parse(Object.fromEntries(form)))
    return { done: 'The account is made. Signing you in…' }
  } catch (error) {
    return failedForm(error, form)
  }
}
