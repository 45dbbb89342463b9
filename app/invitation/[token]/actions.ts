'use server'

import { redirect } from 'next/navigation'
import { failedForm, type FormState } from '@/app/_lib/form-state'
import { database } from '@/lib/platform/database'
import { acceptAsNewPerson, acceptAsViewer, NewPersonInput } from '@/lib/work/people/accept-invitation'
import { getViewer } from '@/lib/work/people/session'

export async function acceptAsNewPersonAction(token: string, _before: FormState, form: FormData): Promise<FormState> {
  try {
    await acceptAsNewPerson(await database(), token, NewPersonInput.parse(Object.fromEntries(form)))
    return { done: 'Welcome. Opening the campaign…' }
  } catch (error) {
    return failedForm(error, form)
  }
}

export async function acceptAsViewerAction(token: string, _before: FormState, form: FormData): Promise<FormState> {
  try {
    const { slug } = await acceptAsViewer(await database(), await getViewer(), token)
    redirect(`/campaigns/${slug}`)
  } catch (error) {
    return failedForm(error, form)
  }
}
