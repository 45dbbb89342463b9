import 'server-only'
import type { Kysely } from 'kysely'
import { z } from 'zod'
import { findBatch, refuseWaitingOfBatch, setBatchState } from '@/db/queries/batches'
import { releaseDuplicates } from '@/db/queries/intake'
import type { DB } from '@/db/schema'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import { notFound } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'
import type { Refusal } from './refusals'
import { requestReading, requestUnpacking } from './request-reading'

export const BatchControl = z.strictObject({
  reading: z.enum(['pause', 'go on', 'cancel'], 'Send {"reading":"pause"}, "go on" or "cancel".'),
})

export type BatchControl = z.output<typeof BatchControl>

const CANCELLED: Refusal = {
  fault: 'cancelled',
  reason:
    'Its batch was cancelled before this file was read. The bytes are kept: have refused files tried again to read it.',
}

const IDS_PER_STATEMENT = 1000

/**
 * A lead pauses the reading of a batch, has it go on, or cancels it: what is not read yet is refused then and can be tried
 * again; what is read stays. Returns how many files were refused.
 */
export async function controlBatch(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  batchId: number,
  { reading }: BatchControl,
): Promise<{ cancelled: number }> {
  return db.transaction().execute(async (transaction) => {
    const campaignId = permit.campaign.id
    const batch = await findBatch(transaction, campaignId, batchId)
    if (!batch) throw notFound('batch')
    await setBatchState(transaction, batchId, reading === 'pause' ? 'paused' : 'open')
    const now = isoTime()
    const ids = reading === 'cancel' ? await refuseWaitingOfBatch(transaction, batchId, CANCELLED, now) : []
    for (let start = 0; start < ids.length; start += IDS_PER_STATEMENT) {
      await releaseDuplicates(transaction, ids.slice(start, start + IDS_PER_STATEMENT), now)
    }
    if (reading !== 'pause') {
      await requestReading(transaction, campaignId)
      await requestUnpacking(transaction, campaignId)
    }
    await recordEvent(transaction, {
      personId: permit.viewer.id,
      campaignId,
      action: 'intake.batch-controlled',
      subject: batch.name,
      detail: { reading, cancelled: ids.length },
    })
    return { cancelled: ids.length }
  })
}
