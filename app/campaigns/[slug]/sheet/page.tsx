import type { Metadata } from 'next'
import { permitPage } from '@/app/_lib/page-permit'
import { ClosedSheet } from '@/components/sheet/closed-sheet'
import { Sheet } from '@/components/sheet/sheet'
import { lendSheet } from '@/lib/work/sheet/lend-sheet'
import { mayPass } from '@/lib/work/sheet/may-pass'
import { passersProgress } from '@/lib/work/sheet/sheet-progress'

export const metadata: Metadata = { title: 'First pass' }

/** A page that is looked at and the next. */
const FIRST_STAMPS = 120

export default async function SheetPage({ params }: PageProps<'/campaigns/[slug]/sheet'>) {
  const { slug } = await params
  const { db, permit: reader } = await permitPage(slug, 'read', '/sheet')
  const { campaign, role } = reader
  if (campaign.uses_sheet !== 1 || !(await mayPass(db, reader))) {
    return (
      <ClosedSheet
        slug={slug}
        campaignName={campaign.name}
        usesSheet={campaign.uses_sheet === 1}
        lead={role === 'lead'}
      />
    )
  }
  const { permit } = await permitPage(slug, 'grade', '/sheet')
  const first = { ...(await lendSheet(db, permit, FIRST_STAMPS)), progress: await passersProgress(db, permit) }
  return <Sheet slug={slug} campaignName={campaign.name} personId={permit.viewer.id} first={first} />
}
