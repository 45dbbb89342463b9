import 'server-only'
import type { Kysely } from 'kysely'
import { findNewestRun, findRuleOfRun } from '@/db/queries/consensus'
import type { DB } from '@/db/schema'
import type { RunSummary } from '@/db/schema/consensus'
import { fromJson } from '@/db/schema/values'
import type { CampaignPermit } from '@/lib/work/people/permission'

export interface NewestRun {
  id: number
  ruleVersion: number
  createdAt: string
  summary: RunSummary
}

/** The newest consensus run of the campaign, or null before the first. */
export async function newestRun(db: Kysely<DB>, permit: CampaignPermit<'lead'>): Promise<NewestRun | null> {
  const run = await findNewestRun(db, permit.campaign.id)
  if (!run) return null
  const rule = await findRuleOfRun(db, run.id)
  return { id: run.id, ruleVersion: rule.version, createdAt: run.created_at, summary: fromJson(run.summary) }
}
