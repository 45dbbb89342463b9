import type { Metadata } from 'next'
import { notFound } from 'next/navigation'
import { permitPage } from '@/app/_lib/page-permit'
import { KnownScreen } from '@/components/matching/known-screen'
import { knownPage } from '@/lib/work/matching/known-page'

export const metadata: Metadata = { title: 'Known objects' }

/** Leads and viewers; to graders the counts would tell of candidates that they have not judged. */
export default async function KnownRoute({ params }: PageProps<'/campaigns/[slug]/known'>) {
  const { slug } = await params
  const { db, permit } = await permitPage(slug, 'read', '/known')
  if (permit.role === 'grader') notFound()
  return <KnownScreen slug={slug} isLead={permit.role === 'lead'} first={await knownPage(db, permit)} />
}
