'use server'

import { revalidatePath } from 'next/cache'
import { redirect } from 'next/navigation'
import { permitLead } from '@/app/_lib/action-permit'
import { failedForm, type FormState } from '@/app/_lib/form-state'
import { Problem } from '@/lib/platform/problems/problem'
import { runConsensus } from '@/lib/work/consensus/run-consensus'
import { ruleOnCandidate } from '@/lib/work/rulings/rule-on-candidate'
import { parseRulingForm } from '@/lib/work/rulings/ruling-input'

/** Rules on the case and goes on to the next split, which the form names. */
export async function ruleOnSplitAction(
  slug: string,
  candidateId: number,
  _before: FormState,
  form: FormData,
): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    await ruleOnCandidate(db, permit, candidateId, parseRulingForm(form))
  } catch (error) {
    // What the lead has not seen yet, such as another lead's ruling, comes with the refusal.
    if (error instanceof Problem && error.status === 409) revalidatePath(`/campaigns/${slug}`, 'layout')
    return failedForm(error, form)
  }
  revalidatePath(`/campaigns/${slug}`, 'layout')
  const next = Number(form.get('next'))
  const query = new URLSearchParams({ ...(next > 0 ? { case: String(next) } : {}), ruled: String(candidateId) })
  redirect(`/campaigns/${slug}/splits?${query}`)
}

/** Runs the consensus now and says what came of it. */
export async function runConsensusAction(slug: string, _before: FormState): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    const { unchanged, summary } = await runConsensus(db, permit)
    revalidatePath(`/campaigns/${slug}`, 'layout')
    if (unchanged) return { done: 'Nothing has changed since the newest run, so nothing was written.' }
    const verdicts = summary.changed === 1 ? 'One verdict is new.' : `${summary.changed} verdicts are new.`
    return { done: `The consensus has run. ${verdicts}` }
  } catch (error) {
    return failedForm(error, new FormData())
  }
}
