'use server'

import { permitLead } from '@/app/_lib/action-permit'
import type { FormState } from '@/app/_lib/form-state'
import { roomAction } from '@/app/_lib/room-action'
import { bringBackList, changeList, discardList, retireList, takeInList } from '@/lib/work/matching/change-list'
import { parseDetailsForm } from '@/lib/work/matching/list-details'
import { parseMappingField } from '@/lib/work/matching/list-mapping'

/** Has the list read by the columns that the form names, and goes back to the lists, where its progress is told. */
export async function takeInListAction(slug: string, listId: number, _before: FormState, form: FormData) {
  return roomAction(permitLead, slug, form, async ({ db, permit }) => {
    const mapping = parseMappingField(form.get('mapping'))
    form.delete('mapping')
    await takeInList(db, permit, listId, { mapping, details: parseDetailsForm(form) })
    return { goTo: `/campaigns/${slug}/known` }
  })
}

/** Changes what is told of a list that is there, its radius and its rule. */
export async function changeListAction(slug: string, listId: number, _before: FormState, form: FormData) {
  return roomAction(permitLead, slug, form, async ({ db, permit }) => {
    form.delete('mapping')
    await changeList(db, permit, listId, parseDetailsForm(form))
    return 'Saved. A changed radius is matched in the background.'
  })
}

export async function retireListAction(slug: string, listId: number, _before: FormState, form: FormData) {
  return roomAction(permitLead, slug, form, async ({ db, permit }) => {
    const { name } = await retireList(db, permit, listId)
    return `${name} is retired: it labels nothing.`
  })
}

export async function bringBackListAction(slug: string, listId: number, _before: FormState, form: FormData) {
  return roomAction(permitLead, slug, form, async ({ db, permit }) => {
    const { name } = await bringBackList(db, permit, listId)
    return `${name} is back.`
  })
}

/** Takes a list away that was never in force, and goes back to the others. */
export async function discardListAction(slug: string, listId: number, _before: FormState, form: FormData) {
  return roomAction(permitLead, slug, form, async ({ db, permit }) => {
    await discardList(db, permit, listId)
    return { goTo: `/campaigns/${slug}/known` }
  })
}
