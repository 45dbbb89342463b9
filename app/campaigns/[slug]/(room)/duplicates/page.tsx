import type { Metadata } from 'next'
import { permitPage } from '@/app/_lib/page-permit'
import { DuplicatesScreen } from '@/components/matching/duplicates-screen'
import { duplicatesPage } from '@/lib/work/matching/duplicates-page'
import { againAction, changeRadiusAction, differAction, mergeAction, partAction } from './actions'

export const metadata: Metadata = { title: 'Duplicates' }

/** Leads: candidates that may be one object, side by side. */
export default async function DuplicatesRoute({ params }: PageProps<'/campaigns/[slug]/duplicates'>) {
  const { slug } = await params
  const { db, permit } = await permitPage(slug, 'lead', '/duplicates')
  return (
    <DuplicatesScreen
      slug={slug}
      personId={permit.viewer.id}
      page={await duplicatesPage(db, permit)}
      mergeAction={mergeAction.bind(null, slug)}
      differAction={differAction.bind(null, slug)}
      partAction={partAction.bind(null, slug)}
      againAction={againAction.bind(null, slug)}
      radiusAction={changeRadiusAction.bind(null, slug)}
    />
  )
}
