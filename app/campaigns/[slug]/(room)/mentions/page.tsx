import type { Metadata } from 'next'
import { permitPage } from '@/app/_lib/page-permit'
import { MentionList } from '@/components/discussion/mention-list'
import { mentionsOfMe } from '@/lib/work/discussion/list-mentions'

export const metadata: Metadata = { title: 'Mentions' }

/** Every member; of candidates that are to be graded first nothing of the message is told. */
export default async function MentionsPage({ params }: PageProps<'/campaigns/[slug]/mentions'>) {
  const { slug } = await params
  const { db, permit } = await permitPage(slug, 'read', '/mentions')
  return <MentionList slug={slug} mentions={await mentionsOfMe(db, permit)} />
}
