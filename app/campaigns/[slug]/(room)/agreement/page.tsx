import type { Metadata } from 'next'
import { notFound } from 'next/navigation'
import { permitPage } from '@/app/_lib/page-permit'
import { AgreementView } from '@/components/agreement/agreement-view'
import { agreementReport } from '@/lib/work/reports/agreement-report'
import { ALERT_RULES } from '@/lib/work/reports/alert-thresholds'
import { LEAST_SHARED } from '@/lib/work/reports/pair-agreement'

export const metadata: Metadata = { title: 'Agreement' }

/** Leads with names, viewers with pseudonyms; graders judge best without it. */
export default async function AgreementPage({ params }: PageProps<'/campaigns/[slug]/agreement'>) {
  const { slug } = await params
  const { db, permit } = await permitPage(slug, 'read', '/agreement')
  if (permit.role === 'grader') notFound()
  return (
    <AgreementView
      report={await agreementReport(db, permit)}
      campaignPath={`/campaigns/${slug}`}
      fileName={slug}
      leastShared={LEAST_SHARED}
      alertRules={ALERT_RULES}
      pseudonyms={permit.role === 'viewer'}
    />
  )
}
