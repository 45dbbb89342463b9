import type { Metadata } from 'next'
import { permitPage } from '@/app/_lib/page-permit'
import { SplitsScreen } from '@/components/splits/splits-screen'
import { campaignCounts } from '@/lib/work/campaigns/campaign-counts'
import { newestRun } from '@/lib/work/consensus/newest-run'
import { findSplitCase } from '@/lib/work/rulings/find-split-case'
import { listSplitCases } from '@/lib/work/rulings/list-splits'
import { ruleOnSplitAction, runConsensusAction } from './actions'

export const metadata: Metadata = { title: 'Splits' }

const idOf = (value: string | string[] | undefined) =>
  typeof value === 'string' && /^\d{1,15}$/.test(value) ? Number(value) : null

/** Leads. `?case=` is the chosen candidate, the first split where there is none; `?ruled=` the one ruled on a moment ago. */
export default async function SplitsPage({ params, searchParams }: PageProps<'/campaigns/[slug]/splits'>) {
  const { slug } = await params
  const { db, permit } = await permitPage(slug, 'lead', '/splits')
  const query = await searchParams
  const asked = query.case === undefined ? null : (idOf(query.case) ?? 0)
  const [splits, run, counts] = await Promise.all([
    listSplitCases(db, permit),
    newestRun(db, permit),
    campaignCounts(db, permit),
  ])
  const found = await findSplitCase(db, permit, splits, asked)
  return (
    <SplitsScreen
      slug={slug}
      personId={permit.viewer.id}
      splits={splits}
      run={run}
      open={counts.open}
      {...found}
      justRuled={splits.ruled.find((ruling) => ruling.candidateId === idOf(query.ruled)) ?? null}
      ruleAction={ruleOnSplitAction.bind(null, slug, found.evidence?.id ?? 0)}
      runAction={runConsensusAction.bind(null, slug)}
    />
  )
}
