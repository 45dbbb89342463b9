import type { Metadata } from 'next'
import { permitPage } from '@/app/_lib/page-permit'
import { ClosedBench } from '@/components/bench/closed-bench'
import { PracticeRoom } from '@/components/practice/practice-room'
import { practiceState } from '@/lib/work/calibration/practice'
import { roleMay } from '@/lib/work/people/permission'

export const metadata: Metadata = { title: 'Practice' }

export default async function PracticePage({ params }: PageProps<'/campaigns/[slug]/practice'>) {
  const { slug } = await params
  const { permit: reader } = await permitPage(slug, 'read', '/practice')
  if (!roleMay(reader.role, 'grade')) return <ClosedBench slug={slug} campaignName={reader.campaign.name} />
  const { db, permit } = await permitPage(slug, 'grade', '/practice')
  const { campaign, viewer, role } = permit
  return (
    <PracticeRoom
      slug={slug}
      campaignName={campaign.name}
      personId={viewer.id}
      lead={role === 'lead'}
      first={await practiceState(db, permit)}
    />
  )
}
