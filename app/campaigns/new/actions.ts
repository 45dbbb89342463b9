'use server'

import { redirect } from 'next/navigation'
import { failedForm, type FormState } from '@/app/_lib/form-state'
import { database } from '@/lib/platform/database'
import { parseCampaignForm } from '@/lib/work/campaigns/campaign-input'
import { createCampaign } from '@/lib/work/campaigns/create-campaign'
import { getViewer } from '@/lib/work/people/session'

export async function createCampaignAction(_before: FormState, form: FormData): Promise<FormState> {
  try {
    const { campaign, rule } = parseCampaignForm(Object.fromEntries(form))
    const { slug } = await createCampaign(await database(), await getViewer(), campaign, rule)
    redirect(`/campaigns/${slug}`)
  } catch (error) {
    return failedForm(error, form)
  }
}
