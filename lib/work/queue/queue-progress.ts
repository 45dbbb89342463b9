import 'server-only'
import type { Kysely } from 'kysely'
import { countAsks } from '@/db/queries/asked-looks'
import { countGradedCandidates, countOpenCandidates } from '@/db/queries/queue'
import type { DB } from '@/db/schema'
import { isoTime } from '@/lib/platform/clock'
import { ruleInForce } from '@/lib/work/campaigns/rule-in-force'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { askerOf } from '@/lib/work/campaigns/asker'

export interface QueueProgress {
  /** Looks this person has given: candidates graded, and looks that they were asked for. */
  given: number
  /** Looks this person may still give: asked looks, and candidates that they may still be shown, those on other people's benches just now included. */
  left: number
}

export async function queueProgress(db: Kysely<DB>, permit: CampaignPermit<'grade'>): Promise<QueueProgress> {
  const { campaign, viewer } = permit
  const asker = askerOf(campaign.id, viewer.id, await ruleInForce(db, campaign.id), isoTime())
  const asks = await countAsks(db, asker)
  return {
    given: (await countGradedCandidates(db, campaign.id, viewer.id)) + asks.answered,
    left: (await countOpenCandidates(db, asker)) + asks.open,
  }
}
