import 'server-only'
import type { Kysely } from 'kysely'
import { countGradedCandidates, countOpenCandidates } from '@/db/queries/queue'
import type { DB } from '@/db/schema'
import { isoTime } from '@/lib/platform/clock'
import { ruleInForce } from '@/lib/work/campaigns/rule-in-force'
import type { CampaignPermit } from '@/lib/work/people/permission'

export interface QueueProgress {
  /** Candidates this person has graded. */
  given: number
  /** Candidates this person may still be shown, those on other people's benches just now included. */
  left: number
}

export async function queueProgress(db: Kysely<DB>, permit: CampaignPermit<'grade'>): Promise<QueueProgress> {
  const { campaign, viewer } = permit
  const { gradesWanted } = await ruleInForce(db, campaign.id)
  const asker = { campaignId: campaign.id, personId: viewer.id, gradesWanted, now: isoTime() }
  return {
    given: await countGradedCandidates(db, campaign.id, viewer.id),
    left: await countOpenCandidates(db, asker),
  }
}
