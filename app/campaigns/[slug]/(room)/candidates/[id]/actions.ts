'use server'

import { permitGrader, permitLead } from '@/app/_lib/action-permit'
import type { FormState } from '@/app/_lib/form-state'
import { roomAction } from '@/app/_lib/room-action'
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
export async function ruleOnCandidateAction(slug: string, candidateId: number, _before: FormState, form: FormData) {
  return roomAction(permitLead, slug, form, async ({ db, permit }) => {
    const { state, sentOn } = await ruleOnCandidate(db, permit, candidateId, parseRulingForm(form))
    return `Ruled: it is ${state} now${sentOn ? ', and sent on to the bench' : ''}.`
  })
}

/** Says something in the discussion of a candidate. */
export async function postMessageAction(slug: string, candidateId: number, _before: FormState, form: FormData) {
  return roomAction(permitGrader, slug, form, async ({ db, permit }) =>
    sentInWords(await postMessage(db, permit, candidateId, MessageInput.parse({ body: form.get('body') }))),
  )
}

/** Asks people by name for another look. */
export async function askLooksAction(slug: string, candidateId: number, _before: FormState, form: FormData) {
  return roomAction(permitLead, slug, form, async ({ db, permit }) => {
    const { asked } = await askLooks(db, permit, candidateId, parseAskForm(form))
    return `Asked: ${asked.join(', ')}. It is first on their benches.`
  })
}

/** Takes an asked look back; the form names it. */
export async function withdrawAskAction(slug: string, _before: FormState, form: FormData) {
  return roomAction(permitLead, slug, form, async ({ db, permit }) => {
    const { name } = await withdrawAsk(db, permit, Number(form.get('ask')))
    return `The look asked of ${name} is withdrawn.`
  })
}

/** Sends on what the first pass did not. */
export async function sendOnAction(slug: string, candidateId: number, _before: FormState, form: FormData) {
  return roomAction(permitLead, slug, form, async ({ db, permit }) => {
    await sendOn(db, permit, candidateId)
    return 'Sent on: it comes to the bench.'
  })
}
