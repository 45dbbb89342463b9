import type { Metadata } from 'next'
import { permitPage } from '@/app/_lib/page-permit'
import { IntakeScreen } from '@/components/intake/intake-screen'
import { FILES_PER_PAGE } from '@/components/intake/files-per-page'
import { fromJson } from '@/db/schema/values'
import { DEFAULT_NAME_PATTERN } from '@/lib/work/campaigns/campaign-input'
import { FileListQuery, listDeliveredFiles } from '@/lib/work/intake/list-files'
import { saveNamePattern } from './actions'

export const metadata: Metadata = { title: 'Intake' }

const Filter = FileListQuery.pick({ fate: true, search: true })

export default async function IntakePage({ params, searchParams }: PageProps<'/campaigns/[slug]/intake'>) {
  const [{ slug }, query] = await Promise.all([params, searchParams])
  const { db, permit } = await permitPage(slug, 'lead', '/intake')
  const { campaign } = permit
  // An address that was mistyped shows everything.
  const { fate, search } = Filter.safeParse({ fate: query.fate, search: query.search }).data ?? {}
  const initial = await listDeliveredFiles(db, permit, { limit: FILES_PER_PAGE, first: 'refused', fate, search })
  const rules = { pattern: campaign.name_pattern ?? DEFAULT_NAME_PATTERN, bands: fromJson(campaign.bands) }
  return (
    <IntakeScreen
      slug={slug}
      initial={initial}
      initialFilter={{ fate: fate ?? null, search: search ?? '', cursor: null }}
      rules={rules}
      savePattern={saveNamePattern.bind(null, slug)}
    />
  )
}
