import type { Metadata } from 'next'
import { notFound } from 'next/navigation'
import { permitPage } from '@/app/_lib/page-permit'
import { ReleasesScreen } from '@/components/releases/releases-screen'
import { releaseList } from '@/lib/work/releases/list-releases'
import { accessAction, giveUpAction, makeAgainAction } from './actions'

export const metadata: Metadata = { title: 'Releases' }

/** Leads and viewers; graders read what is public where everybody does. */
export default async function ReleasesPage({ params }: PageProps<'/campaigns/[slug]/releases'>) {
  const { slug } = await params
  const { db, permit } = await permitPage(slug, 'read', '/releases')
  if (permit.role === 'grader') notFound()
  const releases = await releaseList(db, permit)
  return (
    <ReleasesScreen
      slug={slug}
      acronym={permit.campaign.acronym}
      releases={releases.map((release) => ({
        ...release,
        accessAction: accessAction.bind(null, slug, release.number),
        giveUpAction: giveUpAction.bind(null, slug, release.number),
        againAction: makeAgainAction.bind(null, slug, release.number),
      }))}
      mayPublish={permit.role === 'lead'}
    />
  )
}
