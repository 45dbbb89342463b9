import type { Metadata } from 'next'
import { notFound } from 'next/navigation'
import { permitPage } from '@/app/_lib/page-permit'
import { LeaveOutView } from '@/components/agreement/leave-out-view'
import { Problem } from '@/lib/platform/problems/problem'
import { LONGEST_LEAVE_OUT_REASON } from '@/lib/work/consensus/leave-out-input'
import { previewLeaveOut } from '@/lib/work/consensus/preview-leave-out'
import { leaveOutAction } from '../../actions'

export const metadata: Metadata = { title: 'Leave a grader out' }

/** Leads. Shows what would change and asks for the reason; where the person is left out already, the way back. */
export default async function LeaveOutPage({ params }: PageProps<'/campaigns/[slug]/agreement/graders/[personId]'>) {
  const { slug, personId } = await params
  const path = `/agreement/graders/${personId}`
  const { db, permit } = await permitPage(slug, 'lead', path)
  if (!/^\d{1,15}$/.test(personId)) notFound()
  const preview = await previewLeaveOut(db, permit, Number(personId)).catch((error: unknown) => {
    if (error instanceof Problem && error.status === 404) notFound()
    throw error
  })
  return (
    <LeaveOutView
      preview={preview}
      back={`/campaigns/${slug}/agreement`}
      longestReason={LONGEST_LEAVE_OUT_REASON}
      action={leaveOutAction.bind(null, slug, Number(personId), preview.leftOut === null)}
    />
  )
}
