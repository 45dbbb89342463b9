import type { Metadata } from 'next'
import { notFound } from 'next/navigation'
import { permitPage } from '@/app/_lib/page-permit'
import { RecordView } from '@/components/record/record-view'
import { Problem } from '@/lib/platform/problems/problem'
import { gradersOf, recordOfGrader } from '@/lib/work/calibration/grader-record'

export const metadata: Metadata = { title: 'A grader’s looks' }

export default async function GraderRecordPage({ params }: PageProps<'/campaigns/[slug]/people/[id]'>) {
  const { slug, id } = await params
  const { db, permit } = await permitPage(slug, 'lead', `/people/${id}`)
  const record = await recordOfGrader(db, permit, Number(id)).catch((error: unknown) => {
    if (error instanceof Problem && error.status === 404) notFound()
    throw error
  })
  return <RecordView slug={slug} record={record} own={false} graders={await gradersOf(db, permit)} />
}
