'use server'

import { revalidatePath } from 'next/cache'
import { failedForm, type FormState } from '@/app/_lib/form-state'
import { database } from '@/lib/platform/database'
import { changeOwnName, changeOwnPassword, NameInput, PasswordInput } from '@/lib/work/people/accounts'
import { getViewer } from '@/lib/work/people/session'

export async function changeNameAction(_before: FormState, form: FormData): Promise<FormState> {
  try {
    const { name } = NameInput.parse(Object.fromEntries(form))
    await changeOwnName(await database(), await getViewer(), name)
    revalidatePath('/', 'layout')
    return { done: `You are ${name} now, in every campaign.` }
  } catch (error) {
    return failedForm(error, form)
  }
}

export async function changePasswordAction(_before: FormState, form: FormData): Promise<FormState> {
  try {
    const input = PasswordInput.parse(Object.fromEntries(form))
    await changeOwnPassword(await database(), await getViewer(), input)
    return { done: 'The password is changed. Every other place where you were signed in is signed out.' }
  } catch (error) {
    return failedForm(error, form)
  }
}
