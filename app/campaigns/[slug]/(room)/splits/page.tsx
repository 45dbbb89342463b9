import type { Metadata } from 'next'
import { permitPage } from '@/app/_lib/page-permit'
import { KnownLabelMark } from '@/components/matching/known-label'
import { SplitsScreen } from '@/components/splits/splits-screen'
import { campaignCounts } from '@/lib/work/campaigns/campaign-counts'
import { newestRun } from '@/lib/work/consensus/newest-run'
import { knownLabels } from '@/lib/work/matching/known-labels'
import { findSplitCase } from '@/lib/work/rulings/find-split-case'
import { splitOrderOf } from '@/lib/work/rulings/split-worth'
import { listSplitCases } from '@/lib/work/rulings/list-splits'
import { talkOf } from '../candidates/[id]/talk'
import { ruleOnSeveralAction, ruleOnSplitAction, runConsensusAction, undoSeveralAction } from './actions'

export const metadata: Metadata = { title: 'Splits' }

const idOf = (value: string | string[] | undefined) =>
  typeof value === 'string' && /^\d{1,15}$/.test(value) ? Number(value) : null

/** Leads. `?case=` is the chosen candidate, the first split where there is none; `?ruled=` the one ruled on a moment ago, `?sort=` the order. */
export default async function SplitsPage({ params, searchParams }: PageProps<'/campaigns/[slug]/splits'>) {
  const { slug } = await params
  const { db, permit } = await permitPage(slug, 'lead', '/splits')
  const query = await searchParams
  const asked = query.case === undefined ? null : (idOf(query.case) ?? 0)
  const [splits, run, counts] = await Promise.all([
    listSplitCases(db, permit, splitOrderOf(query.sort)),
    newestRun(db, permit),
    campaignCounts(db, permit),
  ])
  const found = await findSplitCase(db, permit, splits, asked)
  const { evidence } = found
  const calibration = evidence?.judgement?.calibration ?? false
  const talk = evidence ? await talkOf(db, permit, evidence.id, { calibration }) : null
  const known = evidence ? (await knownLabels(db, permit, [evidence.id])).get(evidence.id) : undefined
  return (
    <SplitsScreen
      slug={slug}
      personId={permit.viewer.id}
      splits={splits}
      run={run}
      open={counts.open}
      {...found}
      talk={talk}
      known={known ? <KnownLabelMark labels={known} /> : null}
      justRuled={splits.ruled.find((ruling) => ruling.candidateId === idOf(query.ruled)) ?? null}
      ruleAction={ruleOnSplitAction.bind(null, slug, found.evidence?.id ?? 0)}
      groupAction={ruleOnSeveralAction.bind(null, slug)}
      undoGroupAction={undoSeveralAction.bind(null, slug)}
      runAction={runConsensusAction.bind(null, slug)}
    />
  )
}
