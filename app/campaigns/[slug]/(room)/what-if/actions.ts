'use server'

import { z } from 'zod'
import { permitLead } from '@/app/_lib/action-permit'
import type { FormState } from '@/app/_lib/form-state'
import { roomAction } from '@/app/_lib/room-action'
import { RuleInput } from '@/lib/work/campaigns/rule-input'
import { makeRule } from '@/lib/work/consensus/what-if'

const TriedAgainst = z.coerce.number('Load the page again: it does not say which version was tried against.').int()

/** Makes the tried rule the next version, unless another came into force meanwhile. */
export async function makeRuleAction(slug: string, _before: FormState, form: FormData) {
  return roomAction(permitLead, slug, form, async ({ db, permit }) => {
    const { triedAgainst, ...rule } = Object.fromEntries(form)
    const { version } = await makeRule(db, permit, RuleInput.parse(rule), TriedAgainst.parse(triedAgainst))
    return `Version ${version} is in force. A consensus run applies it to every candidate now.`
  })
}
