import type { Metadata } from 'next'
import { permitPage } from '@/app/_lib/page-permit'
import { IntakeScreen } from '@/components/intake/intake-screen'
import { FILES_PER_PAGE } from '@/components/intake/files-per-page'
import { fromJson } from '@/db/schema/values'
import { DEFAULT_NAME_PATTERN } from '@/lib/work/campaigns/campaign-input'
import { listDeliveredFiles } from '@/lib/work/intake/list-files'

export const metadata: Metadata = { title: 'Intake' }

export default async function IntakePage({ params }: PageProps<'/campaigns/[slug]/intake'>) {
  const { slug } = await params
  const { db, permit } = await permitPage(slug, 'lead', '/intake')
  const { campaign } = permit
  const initial = await listDeliveredFiles(db, permit, { limit: FILES_PER_PAGE, first: 'refused' })
  const rules = { pattern: campaign.name_pattern ?? DEFAULT_NAME_PATTERN, bands: fromJson(campaign.bands) }
  return <IntakeScreen slug={slug} initial={initial} rules={rules} />
}
