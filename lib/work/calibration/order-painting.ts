import 'server-only'
import { randomUUID } from 'node:crypto'
import type { Kysely } from 'kysely'
import { listGalaxiesById } from '@/db/queries/calibration'
import type { DB } from '@/db/schema'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { enqueueJob } from '@/lib/platform/jobs/enqueue-job'
import { JOB } from '@/lib/platform/jobs/job-kinds'
import { invalid } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'
import type { PaintStampsPayload } from './paint-stamps'
import type { OrderInput } from './painting-input'

/**
 * Has calibration stamps made in the background.
 * @throws Problem 422 where a chosen candidate is not of this campaign, has no pictures, is confirmed or is a calibration stamp.
 */
export async function orderPainting(
  db: Kysely<DB>,
  { campaign, viewer }: CampaignPermit<'lead'>,
  input: OrderInput,
): Promise<{ order: string }> {
  const order = randomUUID()
  await db.transaction().execute(async (transaction) => {
    const found = await listGalaxiesById(transaction, campaign.id, input.galaxies)
    if (found.length < input.galaxies.length) {
      const reason = `${input.galaxies.length - found.length} of the chosen candidates cannot be used: they are confirmed, have no pictures, or are calibration stamps. Choose again.`
      throw invalid(reason, [{ name: 'galaxies', reason }])
    }
    const payload: PaintStampsPayload = { campaignId: campaign.id, personId: viewer.id, order, ...input }
    const uniqueKey = `${JOB.paintStamps}:${order}`
    await enqueueJob(transaction, { kind: JOB.paintStamps, campaignId: campaign.id, uniqueKey, payload })
    const { lenses, others, seed, ranges, galaxies } = input
    await recordEvent(transaction, {
      personId: viewer.id,
      campaignId: campaign.id,
      action: 'calibration.ordered',
      detail: { order, lenses, others, seed, ranges, galaxies: galaxies.length },
    })
  })
  return { order }
}
