import 'server-only'
import type { Kysely } from 'kysely'
import { setLooking } from '@/db/queries/campaigns'
import type { DB } from '@/db/schema'
import { recordEvent } from '@/lib/platform/audit/record-event'
import type { CampaignPermit } from '@/lib/work/people/permission'
import type { LookingInput } from './looking-input'

/** For looks from now on; what lies on people's benches stays there. */
export async function changeLooking(
  db: Kysely<DB>,
  { campaign, viewer }: CampaignPermit<'lead'>,
  input: LookingInput,
): Promise<void> {
  const to = {
    queue_order: input.queueOrder,
    calibration_share: input.calibrationPercent,
    repeat_share: input.repeatPercent,
    practice_wanted: input.practiceWanted,
  }
  const { queue_order, calibration_share, repeat_share, practice_wanted } = campaign
  const from = { queue_order, calibration_share, repeat_share, practice_wanted }
  await db.transaction().execute(async (transaction) => {
    await setLooking(transaction, campaign.id, to)
    await recordEvent(transaction, {
      personId: viewer.id,
      campaignId: campaign.id,
      action: 'campaigns.looking-changed',
      detail: { from, to },
    })
  })
}
