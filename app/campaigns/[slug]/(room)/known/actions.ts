'use server'

import { revalidatePath } from 'next/cache'
import { redirect } from 'next/navigation'
import { permitLead } from '@/app/_lib/action-permit'
import { failedForm, type FormState } from '@/app/_lib/form-state'
import { bringBackList, changeList, discardList, retireList, takeInList } from '@/lib/work/matching/change-list'
import { parseDetailsForm } from '@/lib/work/matching/list-details'
import { parseMappingField } from '@/lib/work/matching/list-mapping'

/** Has the list read by the columns that the form names, and goes back to the lists, where its progress is told. */
export async function takeInListAction(
  slug: string,
  listId: number,
  _before: FormState,
  form: FormData,
): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    const mapping = parseMappingField(form.get('mapping'))
    form.delete('mapping')
    await takeInList(db, permit, listId, { mapping, details: parseDetailsForm(form) })
  } catch (error) {
    return failedForm(error, form)
  }
  revalidatePath(`/campaigns/${slug}`, 'layout')
  redirect(`/campaigns/${slug}/known`)
}

/** Changes what is told of a list that is there, its radius and its rule. */
export async function changeListAction(
  slug: string,
  listId: number,
  _before: FormState,
  form: FormData,
): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    form.delete('mapping')
    await changeList(db, permit, listId, parseDetailsForm(form))
    revalidatePath(`/campaigns/${slug}`, 'layout')
    return { done: 'Saved. A changed radius is matched in the background.' }
  } catch (error) {
    return failedForm(error, form)
  }
}

export async function retireListAction(
  slug: string,
  listId: number,
  _before: FormState,
  form: FormData,
): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    const { name } = await retireList(db, permit, listId)
    revalidatePath(`/campaigns/${slug}`, 'layout')
    return { done: `${name} is retired: it labels nothing.` }
  } catch (error) {
    return failedForm(error, form)
  }
}

export async function bringBackListAction(
  slug: string,
  listId: number,
  _before: FormState,
  form: FormData,
): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    const { name } = await bringBackList(db, permit, listId)
    revalidatePath(`/campaigns/${slug}`, 'layout')
    return { done: `${name} is back.` }
  } catch (error) {
    return failedForm(error, form)
  }
}

/** Takes a list away that was never in force, and goes back to the others. */
export async function discardListAction(
  slug: string,
  listId: number,
  _before: FormState,
  form: FormData,
): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    await discardList(db, permit, listId)
  } catch (error) {
    return failedForm(error, form)
  }
  revalidatePath(`/campaigns/${slug}`, 'layout')
  redirect(`/campaigns/${slug}/known`)
}
