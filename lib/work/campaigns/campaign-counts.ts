import 'server-only'
import type { Kysely } from 'kysely'
import { countCandidates, type CampaignCounts } from '@/db/queries/campaigns'
import type { DB } from '@/db/schema'
import type { CampaignPermit } from '@/lib/work/people/permission'

/** How many candidates are in which state, calibration stamps left out. */
export function campaignCounts(db: Kysely<DB>, permit: CampaignPermit<'read'>): Promise<CampaignCounts> {
  return countCandidates(db, permit.campaign.id)
}
