'use server'

import { revalidatePath } from 'next/cache'
import { redirect } from 'next/navigation'
import { permitLead } from '@/app/_lib/action-permit'
import { failedForm, type FormState } from '@/app/_lib/form-state'
import { leaveOut } from '@/lib/work/consensus/leave-out'

/** Leaves a grader out or counts them again, and goes back to the page that says so. */
export async function leaveOutAction(
  slug: string,
  personId: number,
  isOut: boolean,
  _before: FormState,
  form: FormData,
): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    await leaveOut(db, permit, { personId, leftOut: isOut, reason: String(form.get('reason') ?? '') })
  } catch (error) {
    return failedForm(error, form)
  }
  revalidatePath(`/campaigns/${slug}`, 'layout')
  redirect(`/campaigns/${slug}/agreement`)
}
