'use server'

import { revalidatePath } from 'next/cache'
import { permitLead } from '@/app/_lib/action-permit'
import { failedForm, type FormState } from '@/app/_lib/form-state'
import { Problem } from '@/lib/platform/problems/problem'
import { ruleOnCandidate } from '@/lib/work/rulings/rule-on-candidate'
import { parseRulingForm } from '@/lib/work/rulings/ruling-input'

/** Rules on a candidate from its own page, which stays. */
export async function ruleOnCandidateAction(
  slug: string,
  candidateId: number,
  _before: FormState,
  form: FormData,
): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    const { state } = await ruleOnCandidate(db, permit, candidateId, parseRulingForm(form))
    revalidatePath(`/campaigns/${slug}`, 'layout')
    return { done: `Ruled: it is ${state} now.` }
  } catch (error) {
    // What the lead has not seen yet, such as another lead's ruling, comes with the refusal.
    if (error instanceof Problem && error.status === 409) revalidatePath(`/campaigns/${slug}`, 'layout')
    return failedForm(error, form)
  }
}
