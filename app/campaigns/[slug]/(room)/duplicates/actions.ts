'use server'

import { z } from 'zod'
import { permitLead } from '@/app/_lib/action-permit'
import type { FormState } from '@/app/_lib/form-state'
import { roomAction } from '@/app/_lib/room-action'
import { changeMatchRadius } from '@/lib/work/matching/change-list'
import { decideDifferent, decideObject } from '@/lib/work/matching/decide-match'
import { RadiusArcsec } from '@/lib/work/matching/list-details'
import { mergeCandidates, partCandidates } from '@/lib/work/matching/merge-candidates'
import { DifferInput, MergeInput, ObjectInput, PartInput } from '@/lib/work/matching/merge-input'

const valuesOf = (form: FormData) => Object.fromEntries(form)

/** Merges candidates into the one that is kept. */
export async function mergeAction(slug: string, _before: FormState, form: FormData) {
  return roomAction(permitLead, slug, form, async ({ db, permit }) => {
    const { kept, merged } = await mergeCandidates(db, permit, MergeInput.parse(valuesOf(form)))
    return `${merged.join(', ')} ${merged.length === 1 ? 'is' : 'are'} merged into ${kept}.`
  })
}

/** Says that candidates beside each other are different objects. */
export async function differAction(slug: string, _before: FormState, form: FormData) {
  return roomAction(permitLead, slug, form, async ({ db, permit }) => {
    const { names } = await decideDifferent(db, permit, DifferInput.parse(valuesOf(form)))
    return `${names.join(', ')} stay different objects.`
  })
}

/** Proposes again what was said to be different. */
export async function againAction(slug: string, _before: FormState, form: FormData) {
  return roomAction(permitLead, slug, form, async ({ db, permit }) => {
    await decideDifferent(db, permit, DifferInput.parse(valuesOf(form)), 'undecided')
    return 'They are proposed again.'
  })
}

/** Takes a merge back. */
export async function partAction(slug: string, _before: FormState, form: FormData) {
  return roomAction(permitLead, slug, form, async ({ db, permit }) => {
    const { merged: id, reason } = PartInput.parse(valuesOf(form))
    const { kept, merged } = await partCandidates(db, permit, id, reason)
    return `${merged} is parted from ${kept}: it is as it was before.`
  })
}

/** Whether a candidate is the known object beside it. */
export async function decideObjectAction(slug: string, candidateId: number, _before: FormState, form: FormData) {
  return roomAction(permitLead, slug, form, async ({ db, permit }) => {
    const input = ObjectInput.parse(valuesOf(form))
    await decideObject(db, permit, candidateId, input)
    return input.decision === 'different' ? 'The label is taken away.' : 'The label is back.'
  })
}

/** How near candidates must be to be proposed. */
export async function changeRadiusAction(slug: string, _before: FormState, form: FormData) {
  return roomAction(permitLead, slug, form, async ({ db, permit }) => {
    const { radiusArcsec } = z.object({ radiusArcsec: RadiusArcsec }).parse(valuesOf(form))
    await changeMatchRadius(db, permit, radiusArcsec)
    return `Candidates within ${radiusArcsec}″ of each other are proposed.`
  })
}
