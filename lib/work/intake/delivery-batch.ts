import 'server-only'
import type { Kysely } from 'kysely'
import { z } from 'zod'
import { findBatchByName, findNewestBatch, insertBatch } from '@/db/queries/batches'
import type { DB } from '@/db/schema'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import type { CampaignPermit } from '@/lib/work/people/permission'

const HOUR_MS = 3600_000

export const BatchName = z
  .string()
  .trim()
  .min(1, 'The name of a batch is not empty.')
  .max(120, 'The name of a batch has at most 120 characters.')
  .regex(/^[^\u0000-\u001f\u007f]*$/, 'The name of a batch has no control characters.')

/** The batch of this name, or the newest that this person began within the hour, or a new one. Call it in a transaction. */
export async function deliveryBatch(db: Kysely<DB>, permit: CampaignPermit<'lead'>, name?: string): Promise<number> {
  const { campaign, viewer } = permit
  const now = isoTime()
  const found = name
    ? await findBatchByName(db, campaign.id, name)
    : await findNewestBatch(db, campaign.id, viewer.id, isoTime(-HOUR_MS))
  if (found) return found.id
  const given = name ?? `Delivery of ${now.slice(0, 10)} ${now.slice(11, 16)} UTC`
  const id = await insertBatch(db, { campaignId: campaign.id, name: given, personId: viewer.id, now })
  await recordEvent(db, { personId: viewer.id, campaignId: campaign.id, action: 'intake.batch-began', subject: given })
  return id
}
