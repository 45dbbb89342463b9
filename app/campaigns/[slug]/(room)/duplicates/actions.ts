'use server'

import { revalidatePath } from 'next/cache'
import { z } from 'zod'
import { permitLead } from '@/app/_lib/action-permit'
import { failedForm, type FormState } from '@/app/_lib/form-state'
import { Problem } from '@/lib/platform/problems/problem'
import { changeMatchRadius } from '@/lib/work/matching/change-list'
import { decideDifferent, decideObject } from '@/lib/work/matching/decide-match'
import { RadiusArcsec } from '@/lib/work/matching/list-details'
import { mergeCandidates, partCandidates } from '@/lib/work/matching/merge-candidates'
import { DifferInput, MergeInput, ObjectInput, PartInput } from '@/lib/work/matching/merge-input'

/** What others have done meanwhile comes with the refusal. */
function failed(slug: string, error: unknown, form: FormData): FormState {
  if (error instanceof Problem && error.status === 409) revalidatePath(`/campaigns/${slug}`, 'layout')
  return failedForm(error, form)
}

const valuesOf = (form: FormData) => Object.fromEntries(form)

/** Merges candidates into the one that is kept. */
export async function mergeAction(slug: string, _before: FormState, form: FormData): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    const { kept, merged } = await mergeCandidates(db, permit, MergeInput.parse(valuesOf(form)))
    revalidatePath(`/campaigns/${slug}`, 'layout')
    return { done: `${merged.join(', ')} ${merged.length === 1 ? 'is' : 'are'} merged into ${kept}.` }
  } catch (error) {
    return failed(slug, error, form)
  }
}

/** Says that candidates beside each other are different objects. */
export async function differAction(slug: string, _before: FormState, form: FormData): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    const { names } = await decideDifferent(db, permit, DifferInput.parse(valuesOf(form)))
    revalidatePath(`/campaigns/${slug}`, 'layout')
    return { done: `${names.join(', ')} stay different objects.` }
  } catch (error) {
    return failed(slug, error, form)
  }
}

/** Proposes again what was said to be different. */
export async function againAction(slug: string, _before: FormState, form: FormData): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    await decideDifferent(db, permit, DifferInput.parse(valuesOf(form)), 'undecided')
    revalidatePath(`/campaigns/${slug}`, 'layout')
    return { done: 'They are proposed again.' }
  } catch (error) {
    return failed(slug, error, form)
  }
}

/** Takes a merge back. */
export async function partAction(slug: string, _before: FormState, form: FormData): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    const { merged: id, reason } = PartInput.parse(valuesOf(form))
    const { kept, merged } = await partCandidates(db, permit, id, reason)
    revalidatePath(`/campaigns/${slug}`, 'layout')
    return { done: `${merged} is parted from ${kept}: it is as it was before.` }
  } catch (error) {
    return failed(slug, error, form)
  }
}

/** Whether a candidate is the known object beside it. */
export async function decideObjectAction(
  slug: string,
  candidateId: number,
  _before: FormState,
  form: FormData,
): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    const input = ObjectInput.parse(valuesOf(form))
    await decideObject(db, permit, candidateId, input)
    revalidatePath(`/campaigns/${slug}`, 'layout')
    return { done: input.decision === 'different' ? 'The label is taken away.' : 'The label is back.' }
  } catch (error) {
    return failed(slug, error, form)
  }
}

/** How near candidates must be to be proposed. */
export async function changeRadiusAction(slug: string, _before: FormState, form: FormData): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    const { radiusArcsec } = z.object({ radiusArcsec: RadiusArcsec }).parse(valuesOf(form))
    await changeMatchRadius(db, permit, radiusArcsec)
    revalidatePath(`/campaigns/${slug}`, 'layout')
    return { done: `Candidates within ${radiusArcsec}″ of each other are proposed.` }
  } catch (error) {
    return failed(slug, error, form)
  }
}
