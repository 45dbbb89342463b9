import 'server-only'
import type { Kysely } from 'kysely'
import { deleteLeases } from '@/db/queries/queue'
import type { DB } from '@/db/schema'
import type { CampaignPermit } from '@/lib/work/people/permission'

/** Gives the person's leases back, all of the campaign or those of the named candidates, so that others get them at once. */
export async function giveBack(
  db: Kysely<DB>,
  permit: CampaignPermit<'grade'>,
  candidateIds: number[] | null = null,
): Promise<{ returned: number }> {
  return { returned: await deleteLeases(db, permit.campaign.id, permit.viewer.id, candidateIds) }
}
