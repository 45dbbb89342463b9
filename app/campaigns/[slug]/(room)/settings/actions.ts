'use server'

import { revalidatePath } from 'next/cache'
import { permitLead } from '@/app/_lib/action-permit'
import { failedForm, type FormState } from '@/app/_lib/form-state'
import { NamePatternInput } from '@/lib/work/campaigns/campaign-input'
import { changeCosmology } from '@/lib/work/campaigns/change-cosmology'
import { changeLooking } from '@/lib/work/campaigns/change-looking'
import { changeNamePattern, changeRule } from '@/lib/work/campaigns/change-settings'
import { CosmologyInput } from '@/lib/work/campaigns/cosmology-input'
import { LookingInput } from '@/lib/work/campaigns/looking-input'
import { RuleInput } from '@/lib/work/campaigns/rule-input'
import { changeSheet } from '@/lib/work/sheet/change-sheet'
import { SheetSettingsInput } from '@/lib/work/sheet/mark-input'

export async function changeRuleAction(slug: string, _before: FormState, form: FormData): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    const { version } = await changeRule(db, permit, RuleInput.parse(Object.fromEntries(form)))
    revalidatePath(`/campaigns/${slug}`, 'layout')
    return { done: `Version ${version} is in force. A consensus run applies it to every candidate now.` }
  } catch (error) {
    return failedForm(error, form)
  }
}

export async function changeNamePatternAction(slug: string, _before: FormState, form: FormData): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    const { namePattern } = NamePatternInput.parse(Object.fromEntries(form))
    await changeNamePattern(db, permit, namePattern)
    revalidatePath(`/campaigns/${slug}`, 'layout')
    return { done: 'Saved. It holds for files that arrive from now on.' }
  } catch (error) {
    return failedForm(error, form)
  }
}

export async function changeLookingAction(slug: string, _before: FormState, form: FormData): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    await changeLooking(db, permit, LookingInput.parse(Object.fromEntries(form)))
    revalidatePath(`/campaigns/${slug}`, 'layout')
    return { done: 'Saved. It holds for looks from now on.' }
  } catch (error) {
    return failedForm(error, form)
  }
}

export async function changeCosmologyAction(slug: string, _before: FormState, form: FormData): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    await changeCosmology(db, permit, CosmologyInput.parse(Object.fromEntries(form)))
    revalidatePath(`/campaigns/${slug}`, 'layout')
    return { done: 'Saved. It holds for measurements from now on.' }
  } catch (error) {
    return failedForm(error, form)
  }
}

export async function changeSheetAction(slug: string, _before: FormState, form: FormData): Promise<FormState> {
  try {
    const { db, permit } = await permitLead(slug)
    const usesSheet = form.get('usesSheet') === 'on'
    await changeSheet(db, permit, SheetSettingsInput.parse({ usesSheet, passers: form.getAll('passers') }))
    revalidatePath(`/campaigns/${slug}`, 'layout')
    return {
      done: usesSheet
        ? 'Saved. Only what the first pass sends on comes to the bench now, with what has been graded.'
        : 'Saved. Every candidate comes to the bench.',
    }
  } catch (error) {
    return failedForm(error, form)
  }
}
