'use server'

import { revalidatePath } from 'next/cache'
import { permitLead } from '@/app/_lib/action-permit'
import { failedForm } from '@/app/_lib/form-state'
import { NamePatternInput } from '@/lib/work/campaigns/campaign-input'
import { changeNamePattern } from '@/lib/work/campaigns/change-settings'

/** The pattern that was tried on dropped files becomes the campaign's. Answers the sentence of a refusal, or null. */
export async function saveNamePattern(slug: string, pattern: string): Promise<string | null> {
  try {
    const { db, permit } = await permitLead(slug)
    const { namePattern } = NamePatternInput.parse({ namePattern: pattern })
    await changeNamePattern(db, permit, namePattern)
    revalidatePath(`/campaigns/${slug}`, 'layout')
    return null
  } catch (error) {
    const { message, errors } = failedForm(error, new FormData())
    return message ?? errors?.namePattern ?? 'The name pattern could not be saved.'
  }
}
