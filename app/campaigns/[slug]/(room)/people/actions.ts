'use server'

import { revalidatePath } from 'next/cache'
import { redirect } from 'next/navigation'
import { permitLead } from '@/app/_lib/action-permit'
import { failedForm, type FormState } from '@/app/_lib/form-state'
import { mailLeavesSite } from '@/lib/platform/mail/queue-mail'
import { changeRole, endMembership } from '@/lib/work/people/change-membership'
import {
  InviteInput,
  invitePeople,
  RoleInput,
  sendInvitationAgain,
  withdrawInvitation,
} from '@/lib/work/people/invite-people'

const pagePath = (slug: string) => `/campaigns/${slug}/people`

export async function inviteAction(slug: string, _before: FormState, form: FormData): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    const { invited, members } = await invitePeople(db, permit, InviteInput.parse(Object.fromEntries(form)))
    revalidatePath(pagePath(slug))
    const where = mailLeavesSite() ? 'The mail is on its way.' : 'The mail waits in the outbox.'
    const already = members.length ? ` Members already, not invited: ${members.join(', ')}.` : ''
    return { done: `Invited: ${invited.join(', ')}. ${where}${already}` }
  } catch (error) {
    return failedForm(error, form)
  }
}

export async function sendAgainAction(
  slug: string,
  invitationId: number,
  _before: FormState,
  form: FormData,
): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    const { email } = await sendInvitationAgain(db, permit, invitationId)
    revalidatePath(pagePath(slug))
    return { done: `Sent to ${email} again. The earlier link works no more.` }
  } catch (error) {
    return failedForm(error, form)
  }
}

export async function withdrawAction(
  slug: string,
  invitationId: number,
  _before: FormState,
  form: FormData,
): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    await withdrawInvitation(db, permit, invitationId)
    revalidatePath(pagePath(slug))
    return { done: 'Withdrawn.' }
  } catch (error) {
    return failedForm(error, form)
  }
}

export async function changeRoleAction(
  slug: string,
  personId: number,
  _before: FormState,
  form: FormData,
): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    const role = RoleInput.parse(form.get('role'))
    const { name } = await changeRole(db, permit, { personId, role })
    // Who gave up the lead may not see this page any more.
    if (personId === permit.viewer.id && role !== 'lead') redirect(`/campaigns/${slug}`)
    revalidatePath(pagePath(slug))
    return { done: `${name} is a ${role} now.` }
  } catch (error) {
    return failedForm(error, form)
  }
}

export async function endMembershipAction(
  slug: string,
  personId: number,
  _before: FormState,
  form: FormData,
): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    const { name } = await endMembership(db, permit, personId)
    if (personId === permit.viewer.id) redirect('/')
    revalidatePath(pagePath(slug))
    return { done: `${name} is not a member any more.` }
  } catch (error) {
    return failedForm(error, form)
  }
}
