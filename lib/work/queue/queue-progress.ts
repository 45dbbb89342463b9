import 'server-only'
import type { Kysely } from 'kysely'
import { countAsks } from '@/db/queries/asked-looks'
import { countHeldStamps, countLooks, countUnseenStamps, findMix } from '@/db/queries/mixing'
import { countGradedCandidates, countOpenCandidates, type Asker } from '@/db/queries/queue'
import type { DB } from '@/db/schema'
import { isoTime } from '@/lib/platform/clock'
import { ruleInForce } from '@/lib/work/campaigns/rule-in-force'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { askerOf } from '@/lib/work/campaigns/asker'
import { stampsAhead } from './mix'
import { personStream } from './person-stream'

export interface QueueProgress {
  /** Looks this person has given: candidates graded, and looks that they were asked for. */
  given: number
  /** Looks this person may still give: asked looks, and candidates that they may still be shown, those on other people's benches just now included. */
  left: number
}

export async function queueProgress(db: Kysely<DB>, permit: CampaignPermit<'grade'>): Promise<QueueProgress> {
  const { campaign, viewer } = permit
  const asker = askerOf(campaign, viewer.id, await ruleInForce(db, campaign.id), isoTime())
  const asks = await countAsks(db, asker)
  const open = await countOpenCandidates(db, asker)
  return {
    given: (await countGradedCandidates(db, campaign.id, viewer.id)) + asks.answered,
    left: open + (await countStampsAhead(db, asker, open)) + asks.open,
  }
}

/** Calibration stamps that will come among so many candidates: they count like any other look. */
async function countStampsAhead(db: Kysely<DB>, asker: Asker, open: number): Promise<number> {
  const { calibrationShare, stamps } = await findMix(db, asker.campaignId)
  if (stamps === 0 || calibrationShare === 0 || open === 0) return 0
  const stream = await personStream(db, asker.campaignId, asker.personId)
  const place = await countLooks(db, asker.campaignId, asker.personId)
  const left = (await countUnseenStamps(db, asker)) + (await countHeldStamps(db, asker))
  return stampsAhead(open, left, (at) => stream.at(at), place, { calibration: calibrationShare, repeat: 0 })
}
