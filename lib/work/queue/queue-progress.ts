import 'server-only'
import type { Kysely } from 'kysely'
import { countAsks } from '@/db/queries/asked-looks'
import { countHeldStamps, countLooks, findMix } from '@/db/queries/mixing'
import { countOpenCandidates, type Asker } from '@/db/queries/queue'
import type { DB } from '@/db/schema'
import type { Role } from '@/db/schema/people'
import { isoTime } from '@/lib/platform/clock'
import { ruleInForce } from '@/lib/work/campaigns/rule-in-force'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { askerOf } from '@/lib/work/campaigns/asker'
import { countMeasuringStamps } from './measuring-stamps'
import { mixedAhead } from './mix'
import { personStream } from './person-stream'
import { LOOKS_BETWEEN, repeatsLeft } from './repeats'

export interface QueueProgress {
  /** Looks this person has given: candidates graded, again where they came back, and looks that they were asked for. */
  given: number
  /** Looks this person may still give: asked looks, and candidates that they may still be shown, those on other people's benches just now included. */
  left: number
}

export async function queueProgress(db: Kysely<DB>, permit: CampaignPermit<'grade'>): Promise<QueueProgress> {
  const { campaign, viewer, role } = permit
  const asker = askerOf(campaign, viewer.id, await ruleInForce(db, campaign.id), isoTime())
  const asks = await countAsks(db, asker)
  const open = await countOpenCandidates(db, asker)
  const place = await countLooks(db, campaign.id, viewer.id)
  return {
    given: place + asks.beside,
    left: open + (await countMixedAhead(db, { ...asker, role }, open, place)) + asks.open,
  }
}

/** What will be mixed in among so many candidates: it counts like any other look. */
async function countMixedAhead(
  db: Kysely<DB>,
  who: Asker & { role: Role },
  open: number,
  place: number,
): Promise<number> {
  const { stamps, calibrationShare, repeatShare } = await findMix(db, who.campaignId)
  if (open === 0 || ((stamps === 0 || calibrationShare === 0) && repeatShare === 0)) return 0
  const shares = { calibration: calibrationShare, repeat: repeatShare }
  const stream = await personStream(db, who.campaignId, who.personId)
  const left = shares.calibration === 0 ? 0 : (await countMeasuringStamps(db, who)) + (await countHeldStamps(db, who))
  const back = shares.repeat === 0 ? { repeats: 0, recent: [] } : await repeatsLeft(db, who)
  const toMix = { ordinary: open, stamps: left, ...back, between: LOOKS_BETWEEN }
  return mixedAhead(toMix, (at) => stream.at(at), place, shares)
}
