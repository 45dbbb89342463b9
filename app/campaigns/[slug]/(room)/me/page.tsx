import type { Metadata } from 'next'
import { permitPage } from '@/app/_lib/page-permit'
import { RecordView } from '@/components/record/record-view'
import { gradersOf, ownRecord } from '@/lib/work/calibration/grader-record'

export const metadata: Metadata = { title: 'Your looks' }

export default async function OwnRecordPage({ params }: PageProps<'/campaigns/[slug]/me'>) {
  const { slug } = await params
  const { db, permit } = await permitPage(slug, 'grade', '/me')
  const graders = permit.role === 'lead' ? await gradersOf(db, (await permitPage(slug, 'lead', '/me')).permit) : null
  return <RecordView slug={slug} record={await ownRecord(db, permit)} own graders={graders} />
}
