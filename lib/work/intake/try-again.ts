import 'server-only'
import type { Kysely } from 'kysely'
import { setRefusedStored } from '@/db/queries/intake'
import type { DB } from '@/db/schema'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { CURABLE_FAULTS } from './refusals'
import { requestReading, requestUnpacking } from './request-reading'
import { readElsewhere } from './same-bytes'

/** A lead has every refused file looked at again. Returns how many. */
export async function tryRefusedAgain(db: Kysely<DB>, permit: CampaignPermit<'lead'>): Promise<number> {
  return db.transaction().execute(async (transaction) => {
    const campaignId = permit.campaign.id
    const files = await setRefusedStored(transaction, campaignId, null, isoTime())
    if (files === 0) return 0
    await recordEvent(transaction, {
      personId: permit.viewer.id,
      campaignId,
      action: 'intake.tried-again',
      detail: { files },
    })
    await requestReading(transaction, campaignId)
    await requestUnpacking(transaction, campaignId)
    return files
  })
}

/** After a manifest came or the name pattern changed: the files that could not be matched are tried again. In a transaction. */
export async function tryUnmatchedAgain(db: Kysely<DB>, campaignId: number): Promise<number> {
  const refused = await setRefusedStored(db, campaignId, CURABLE_FAULTS, isoTime())
  const files = refused + (await readElsewhere(db, campaignId))
  if (files > 0) await requestReading(db, campaignId)
  return files
}
