'use server'

import { revalidatePath } from 'next/cache'
import { permitAdministrator } from '@/app/_lib/action-permit'
import { failedForm, type FormState } from '@/app/_lib/form-state'
import { setAdministrator } from '@/lib/work/people/accounts'
import { retryMail } from '@/lib/work/people/outbox'

export async function setAdministratorAction(
  personId: number,
  isAdmin: boolean,
  _before: FormState,
  form: FormData,
): Promise<FormState> {
  try {
    const { db, permit } = await permitAdministrator()
    const { name } = await setAdministrator(db, permit, { personId, isAdmin })
    revalidatePath('/', 'layout')
    return { done: isAdmin ? `${name} is an administrator now.` : `${name} is no administrator any more.` }
  } catch (error) {
    return failedForm(error, form)
  }
}

export async function retryMailAction(mailId: number, _before: FormState, form: FormData): Promise<FormState> {
  try {
    const { db, permit } = await permitAdministrator()
    await retryMail(db, permit, mailId)
    return { done: 'It is being sent. Load the page again in a moment.' }
  } catch (error) {
    return failedForm(error, form)
  }
}
