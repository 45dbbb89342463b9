'use server'

import { permitLead } from '@/app/_lib/action-permit'
import type { FormState } from '@/app/_lib/form-state'
import { roomAction } from '@/app/_lib/room-action'
import { leaveOut } from '@/lib/work/consensus/leave-out'

/** Leaves a grader out or counts them again, and goes back to the page that says so. */
export async function leaveOutAction(
  slug: string,
  personId: number,
  isOut: boolean,
  _before: FormState,
  form: FormData,
) {
  return roomAction(permitLead, slug, form, async ({ db, permit }) => {
    await leaveOut(db, permit, { personId, leftOut: isOut, reason: String(form.get('reason') ?? '') })
    return { goTo: `/campaigns/${slug}/agreement` }
  })
}
