'use server'

import { revalidatePath } from 'next/cache'
import { permitReader } from '@/app/_lib/action-permit'
import { failedForm, type FormState } from '@/app/_lib/form-state'
import {
  changeView,
  ChangeViewInput,
  deleteView,
  saveView,
  SaveViewInput,
  type TablePage,
} from '@/lib/work/catalogue/saved-views'

const pagePath = (slug: string, page: TablePage) => `/campaigns/${slug}/${page}`

export async function saveViewAction(
  slug: string,
  page: TablePage,
  _before: FormState,
  form: FormData,
): Promise<FormState> {
  try {
    const { db, permit } = await permitReader(slug)
    const input = SaveViewInput.parse(Object.fromEntries(form))
    await saveView(db, permit, page, input)
    revalidatePath(pagePath(slug, page))
    return { done: `Saved: ${input.name}.` }
  } catch (error) {
    return failedForm(error, form)
  }
}

export async function changeViewAction(
  slug: string,
  page: TablePage,
  _before: FormState,
  form: FormData,
): Promise<FormState> {
  try {
    const { db, permit } = await permitReader(slug)
    const input = ChangeViewInput.parse(Object.fromEntries(form))
    await changeView(db, permit, input)
    revalidatePath(pagePath(slug, page))
    return { done: 'Kept.' }
  } catch (error) {
    return failedForm(error, form)
  }
}

export async function deleteViewAction(
  slug: string,
  page: TablePage,
  _before: FormState,
  form: FormData,
): Promise<FormState> {
  try {
    const { db, permit } = await permitReader(slug)
    const { name } = await deleteView(db, permit, Number(form.get('id')))
    revalidatePath(pagePath(slug, page))
    return { done: `Deleted: ${name}.` }
  } catch (error) {
    return failedForm(error, form)
  }
}
