import type { Metadata } from 'next'
import { permitPage } from '@/app/_lib/page-permit'
import { Bench } from '@/components/bench/bench'
import { ClosedBench } from '@/components/bench/closed-bench'
import { PracticeFirst } from '@/components/practice/practice-first'
import { practiceFirst } from '@/lib/work/calibration/practice'
import { roleMay } from '@/lib/work/people/permission'
import { lendNext } from '@/lib/work/queue/lend-next'

export const metadata: Metadata = { title: 'Bench' }

/** Candidates that come with the page, so that the first is there at the first paint. */
const FIRST_CANDIDATES = 5

export default async function BenchPage({ params }: PageProps<'/campaigns/[slug]/bench'>) {
  const { slug } = await params
  const { permit: reader } = await permitPage(slug, 'read', '/bench')
  const { campaign, role } = reader
  if (!roleMay(role, 'grade')) return <ClosedBench slug={slug} campaignName={campaign.name} />
  const { db, permit } = await permitPage(slug, 'grade', '/bench')
  const practice = await practiceFirst(db, permit)
  if (practice) return <PracticeFirst slug={slug} campaignName={campaign.name} {...practice} />
  const first = await lendNext(db, permit, FIRST_CANDIDATES)
  return (
    <Bench slug={slug} campaignName={campaign.name} personId={permit.viewer.id} lead={role === 'lead'} first={first} />
  )
}
