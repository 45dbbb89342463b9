import type { Metadata } from 'next'
import { CampaignForm } from '@/components/campaigns/campaign-form'
import { PageHead } from '@/components/campaigns/page-head'
import { SiteFrame } from '@/components/people/site-frame'
import { EmptyState } from '@/components/ui/notice'
import { database } from '@/lib/platform/database'
import { mayCreateCampaign } from '@/lib/work/campaigns/create-campaign'
import { requireViewer } from '@/lib/work/people/session'
import { createCampaignAction } from './actions'

export const metadata: Metadata = { title: 'New campaign' }

export default async function NewCampaignPage() {
  const viewer = await requireViewer('/campaigns/new')
  const mayCreate = await mayCreateCampaign(await database(), viewer)
  return (
    <SiteFrame viewer={viewer} mayCreate={mayCreate}>
      <PageHead title="A new campaign" lead="One search through one data set. Whoever creates it leads it." />
      {mayCreate ? (
        <CampaignForm action={createCampaignAction} />
      ) : (
        <EmptyState title="Creating a campaign takes a lead or an administrator">
          <p>Ask an administrator of this site to create it and to make you its lead.</p>
        </EmptyState>
      )}
    </SiteFrame>
  )
}
