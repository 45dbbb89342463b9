import { Suspense } from 'react'
import { permitPage } from '@/app/_lib/page-permit'
import { AgreementLine } from '@/components/agreement/agreement-line'
import { FirstPassPart } from '@/components/campaigns/first-pass-part'
import { GraderOverview, LeadOverview, ViewerOverview } from '@/components/campaigns/overview-view'
import { fromJson } from '@/db/schema/values'
import { campaignOverview } from '@/lib/work/campaigns/campaign-overview'
import { leftToLookAt } from '@/lib/work/queue/left-to-look-at'
import { agreementReport } from '@/lib/work/reports/agreement-report'
import { mayPass } from '@/lib/work/sheet/may-pass'
import { sheetCompleteness, sheetProgress } from '@/lib/work/sheet/sheet-progress'
import { picturesOf } from '@/lib/work/stamps/candidate-pictures'

export async function generateMetadata({ params }: PageProps<'/campaigns/[slug]'>) {
  const { slug } = await params
  const { permit } = await permitPage(slug, 'read')
  return { title: permit.campaign.name }
}

const VIEW = { lead: LeadOverview, grader: GraderOverview, viewer: ViewerOverview }

export default async function OverviewPage({ params }: PageProps<'/campaigns/[slug]'>) {
  const { slug } = await params
  const { db, permit } = await permitPage(slug, 'read')
  const { campaign, role } = permit
  const overview = await campaignOverview(db, permit)
  if (overview.mine) {
    const { permit: grading } = await permitPage(slug, 'grade')
    overview.mine.left = await leftToLookAt(db, grading, overview.mine.asked)
  }
  const newest = overview.outcome?.newestConfirmed ?? []
  const ids = newest.map(({ id }) => id)
  const pictures = await picturesOf(db, campaign, ids)
  const stamps = newest.map(({ id, name }) => {
    const found = pictures.get(id)
    const view = found?.views[0]
    return {
      id,
      name,
      url: view?.url ?? null,
      width: view?.width ?? 1,
      height: view?.height ?? 1,
      geometry: found?.geometry ?? null,
    }
  })
  const bands = fromJson(campaign.bands).join(', ')
  const View = VIEW[role]
  return (
    <View
      overview={overview}
      about={`${campaign.survey} (${campaign.acronym}), bands ${bands}`}
      campaignPath={`/campaigns/${slug}`}
      stamps={stamps}
      firstPass={campaign.uses_sheet === 1 && role !== 'grader' ? <FirstPass slug={slug} /> : null}
      agreementLine={
        <Suspense fallback={null}>
          <AgreementAlerts slug={slug} />
        </Suspense>
      }
    />
  )
}

/** Counted while the page is there already: the report of a large campaign takes seconds. */
async function AgreementAlerts({ slug }: { slug: string }) {
  const { db, permit } = await permitPage(slug, 'read')
  if (permit.role === 'grader') return null
  const { alerts } = await agreementReport(db, permit)
  return <AgreementLine alerts={alerts.length} campaignPath={`/campaigns/${slug}`} />
}

async function FirstPass({ slug }: { slug: string }) {
  const { db, permit } = await permitPage(slug, 'read')
  const lead = permit.role === 'lead' ? (await permitPage(slug, 'lead')).permit : null
  return (
    <FirstPassPart
      progress={await sheetProgress(db, permit)}
      completeness={lead && (await sheetCompleteness(db, lead))}
      campaignPath={`/campaigns/${slug}`}
      passes={await mayPass(db, permit)}
    />
  )
}
