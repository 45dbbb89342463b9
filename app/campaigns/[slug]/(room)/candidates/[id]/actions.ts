'use server'

import { revalidatePath } from 'next/cache'
import { permitGrader, permitLead } from '@/app/_lib/action-permit'
import { failedForm, type FormState } from '@/app/_lib/form-state'
import { Problem } from '@/lib/platform/problems/problem'
import { parseAskForm } from '@/lib/work/discussion/ask-input'
import { askLooks } from '@/lib/work/discussion/ask-looks'
import { MessageInput } from '@/lib/work/discussion/message-input'
import { postMessage } from '@/lib/work/discussion/post-message'
import { sentInWords } from '@/lib/work/discussion/sent-in-words'
import { withdrawAsk } from '@/lib/work/discussion/withdraw-ask'
import { ruleOnCandidate } from '@/lib/work/rulings/rule-on-candidate'
import { parseRulingForm } from '@/lib/work/rulings/ruling-input'
import { sendOn } from '@/lib/work/sheet/send-on'

/** Rules on a candidate from its own page, which stays. */
export async function ruleOnCandidateAction(
  slug: string,
  candidateId: number,
  _before: FormState,
  form: FormData,
): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    const { state, sentOn } = await ruleOnCandidate(db, permit, candidateId, parseRulingForm(form))
    revalidatePath(`/campaigns/${slug}`, 'layout')
    return { done: `Ruled: it is ${state} now${sentOn ? ', and sent on to the bench' : ''}.` }
  } catch (error) {
    // What the lead has not seen yet, such as another lead's ruling, comes with the refusal.
    if (error instanceof Problem && error.status === 409) revalidatePath(`/campaigns/${slug}`, 'layout')
    return failedForm(error, form)
  }
}

/** Says something in the discussion of a candidate. */
export async function postMessageAction(
  slug: string,
  candidateId: number,
  _before: FormState,
  form: FormData,
): Promise<FormState> {
  try {
    const { db, permit } = await permitGrader(slug)
    const sent = await postMessage(db, permit, candidateId, MessageInput.parse({ body: form.get('body') }))
    revalidatePath(`/campaigns/${slug}`, 'layout')
    return { done: sentInWords(sent) }
  } catch (error) {
    return failedForm(error, form)
  }
}

/** Asks people by name for another look. */
export async function askLooksAction(
  slug: string,
  candidateId: number,
  _before: FormState,
  form: FormData,
): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    const { asked } = await askLooks(db, permit, candidateId, parseAskForm(form))
    revalidatePath(`/campaigns/${slug}`, 'layout')
    return { done: `Asked: ${asked.join(', ')}. It is first on their benches.` }
  } catch (error) {
    if (error instanceof Problem && error.status === 409) revalidatePath(`/campaigns/${slug}`, 'layout')
    return failedForm(error, form)
  }
}

/** Takes an asked look back; the form names it. */
export async function withdrawAskAction(slug: string, _before: FormState, form: FormData): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    const { name } = await withdrawAsk(db, permit, Number(form.get('ask')))
    revalidatePath(`/campaigns/${slug}`, 'layout')
    return { done: `The look asked of ${name} is withdrawn.` }
  } catch (error) {
    if (error instanceof Problem && error.status === 409) revalidatePath(`/campaigns/${slug}`, 'layout')
    return failedForm(error, form)
  }
}

/** Sends on what the first pass did not. */
export async function sendOnAction(
  slug: string,
  candidateId: number,
  _before: FormState,
  form: FormData,
): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    await sendOn(db, permit, candidateId)
    revalidatePath(`/campaigns/${slug}`, 'layout')
    return { done: 'Sent on: it comes to the bench.' }
  } catch (error) {
    return failedForm(error, form)
  }
}
