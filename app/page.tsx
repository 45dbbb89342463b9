import type { Metadata } from 'next'
import { WaitingNotice } from '@/components/bench/waiting-notice'
import { CampaignCards, NoCampaigns } from '@/components/campaigns/campaign-cards'
import { counted } from '@/components/campaigns/in-words'
import { PageHead } from '@/components/campaigns/page-head'
import { SiteFrame } from '@/components/people/site-frame'
import { ButtonLink } from '@/components/ui/button'
import { database } from '@/lib/platform/database'
import { mayCreateCampaign } from '@/lib/work/campaigns/create-campaign'
import { listCampaigns } from '@/lib/work/campaigns/list-campaigns'
import { requireViewer } from '@/lib/work/people/session'
import { withLeft } from '@/lib/work/queue/left-to-look-at'

export const metadata: Metadata = { title: { absolute: 'Your campaigns · Ringside' } }

export default async function HomePage() {
  const viewer = await requireViewer('/')
  const db = await database()
  const [cards, mayCreate] = await Promise.all([
    listCampaigns(db, viewer).then((all) => withLeft(db, viewer, all)),
    mayCreateCampaign(db, viewer),
  ])
  return (
    <SiteFrame viewer={viewer} mayCreate={mayCreate}>
      <PageHead title={cards.length ? `You are in ${counted(cards.length, 'campaign')}` : 'Your campaigns'}>
        {mayCreate && cards.length ? (
          <ButtonLink href="/campaigns/new" tone="lamp">
            New campaign
          </ButtonLink>
        ) : null}
      </PageHead>
      <WaitingNotice personId={viewer.id} />
      {cards.length ? <CampaignCards cards={cards} /> : <NoCampaigns mayCreate={mayCreate} email={viewer.email} />}
    </SiteFrame>
  )
}
