'use server'

import { permitLead } from '@/app/_lib/action-permit'
import type { FormState } from '@/app/_lib/form-state'
import { roomAction } from '@/app/_lib/room-action'
import type { GroupState } from '@/components/splits/group-ruling'
import { runConsensus } from '@/lib/work/consensus/run-consensus'
import { parseGroupForm, parseUndoForm, type GroupRuling } from '@/lib/work/rulings/group-input'
import { ruleOnCandidate } from '@/lib/work/rulings/rule-on-candidate'
import { ruleOnSeveral } from '@/lib/work/rulings/rule-on-several'
import { parseRulingForm } from '@/lib/work/rulings/ruling-input'

/** Rules on the case and goes on to the next split, which the form names. */
export async function ruleOnSplitAction(slug: string, candidateId: number, _before: FormState, form: FormData) {
  return roomAction(permitLead, slug, form, async ({ db, permit }) => {
    await ruleOnCandidate(db, permit, candidateId, parseRulingForm(form))
    const next = Number(form.get('next'))
    const query = new URLSearchParams({ ...(next > 0 ? { case: String(next) } : {}), ruled: String(candidateId) })
    return { goTo: `/campaigns/${slug}/splits?${query}` }
  })
}

async function ruleOnGroup(slug: string, form: FormData, parse: (form: FormData) => GroupRuling): Promise<GroupState> {
  return roomAction<Awaited<ReturnType<typeof permitLead>>, GroupState>(
    permitLead,
    slug,
    form,
    async ({ db, permit }) => {
      const ruling = parse(form)
      const group = await ruleOnSeveral(db, permit, ruling)
      const { outcome, grade } = ruling
      return { done: 'Ruled.', group: { ...group, outcome, grade } }
    },
  )
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
export async function runConsensusAction(slug: string, _before: FormState) {
  return roomAction(permitLead, slug, new FormData(), async ({ db, permit }) => {
    const { unchanged, summary } = await runConsensus(db, permit)
    if (unchanged) return 'Nothing has changed since the newest run, so nothing was written.'
    const verdicts = summary.changed === 1 ? 'One verdict is new.' : `${summary.changed} verdicts are new.`
    return `The consensus has run. ${verdicts}`
  })
}
