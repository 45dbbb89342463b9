'use server'

import { revalidatePath } from 'next/cache'
import { z } from 'zod'
import { permitLead } from '@/app/_lib/action-permit'
import { failedForm, type FormState } from '@/app/_lib/form-state'
import { RuleInput } from '@/lib/work/campaigns/rule-input'
import { makeRule } from '@/lib/work/consensus/what-if'

const TriedAgainst = z.coerce.number('Load the page again: it does not say which version was tried against.').int()

/** Makes the tried rule the next version, unless another came into force meanwhile. */
export async function makeRuleAction(slug: string, _before: FormState, form: FormData): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    const { triedAgainst, ...rule } = Object.fromEntries(form)
    const { version } = await makeRule(db, permit, RuleInput.parse(rule), TriedAgainst.parse(triedAgainst))
    revalidatePath(`/campaigns/${slug}`, 'layout')
    return { done: `Version ${version} is in force. A consensus run applies it to every candidate now.` }
  } catch (error) {
    return failedForm(error, form)
  }
}
