'use server'

import { revalidatePath } from 'next/cache'
import { redirect } from 'next/navigation'
import { permitLead } from '@/app/_lib/action-permit'
import { failedForm, type FormState } from '@/app/_lib/form-state'
import type { GroupState } from '@/components/splits/group-ruling'
import { Problem } from '@/lib/platform/problems/problem'
import { runConsensus } from '@/lib/work/consensus/run-consensus'
import { parseGroupForm, parseUndoForm, type GroupRuling } from '@/lib/work/rulings/group-input'
import { ruleOnCandidate } from '@/lib/work/rulings/rule-on-candidate'
import { ruleOnSeveral } from '@/lib/work/rulings/rule-on-several'
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

async function ruleOnGroup(slug: string, form: FormData, parse: (form: FormData) => GroupRuling): Promise<GroupState> {
  try {
    const { db, permit } = await permitLead(slug)
    const ruling = parse(form)
    const group = await ruleOnSeveral(db, permit, ruling)
    revalidatePath(`/campaigns/${slug}`, 'layout')
    const { outcome, grade } = ruling
    return { done: 'Ruled.', group: { ...group, outcome, grade } }
  } catch (error) {
    return failedForm(error, form)
  }
}

/** One ruling on every selected split; the answer tells of each what came of it. */
export async function ruleOnSeveralAction(slug: string, _before: FormState, form: FormData): Promise<GroupState> {
  return ruleOnGroup(slug, form, parseGroupForm)
}

/** Takes a ruling on several back: each by verdict again, unless somebody has ruled since. */
export async function undoSeveralAction(slug: string, _before: FormState, form: FormData): Promise<GroupState> {
  return ruleOnGroup(slug, form, parseUndoForm)
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
