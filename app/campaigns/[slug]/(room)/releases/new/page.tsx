import type { Metadata } from 'next'
import { permitPage } from '@/app/_lib/page-permit'
import { PublishScreen } from '@/components/releases/publish-screen'
import { isoTime } from '@/lib/platform/clock'
import { LICENCES } from '@/lib/work/releases/licences'
import { previewRelease } from '@/lib/work/releases/preview-release'
import { publishAction } from '../actions'

export const metadata: Metadata = { title: 'Publish a release' }

/** `?kind=erratum&of=2` begins with what is corrected. */
export default async function PublishPage({ params, searchParams }: PageProps<'/campaigns/[slug]/releases/new'>) {
  const { slug } = await params
  const { kind, of } = await searchParams
  const { db, permit } = await permitPage(slug, 'lead', '/releases/new')
  const { campaign } = permit
  return (
    <PublishScreen
      home={`/campaigns/${slug}`}
      campaign={campaign.name}
      survey={campaign.survey}
      year={Number(isoTime().slice(0, 4))}
      licences={LICENCES.map(({ id, name }) => ({ id, name }))}
      preview={await previewRelease(db, permit)}
      kind={kind === 'erratum' || kind === 'retraction' ? kind : 'release'}
      of={Number(of) || null}
      action={publishAction.bind(null, slug)}
    />
  )
}
