import 'server-only'
import type { Kysely } from 'kysely'
import { listCandidatesToPass } from '@/db/queries/sheet'
import type { DB } from '@/db/schema'
import type { CampaignPermit } from '@/lib/work/people/permission'

/** Whether the first pass did not send this candidate on, so that a lead may. */
export async function isNotSentOn(
  db: Kysely<DB>,
  { campaign }: CampaignPermit<'lead'>,
  candidateId: number,
): Promise<boolean> {
  if (campaign.uses_sheet !== 1) return false
  const [candidate] = await listCandidatesToPass(db, campaign.id, [candidateId])
  return candidate?.calibration === 0 && candidate.firstPass === 'dropped'
}
