import 'server-only'
import type { Kysely } from 'kysely'
import { findCandidate, listCandidateNames } from '@/db/queries/candidates'
import type { DB } from '@/db/schema'
import { calledTo } from '@/lib/work/campaigns/called'
import { candidateScope } from '@/lib/work/campaigns/candidate-scope'
import type { CampaignPermit } from '@/lib/work/people/permission'

/** What it is called in the title of a page; null where the person's lists do not hold the candidate. */
export async function candidateName(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  candidateId: number,
): Promise<string | null> {
  const { campaignId, withCalibration } = candidateScope(permit)
  const candidate = await findCandidate(db, campaignId, candidateId)
  if (!candidate || (candidate.truth !== null && !withCalibration)) return null
  return (await calledTo(db, permit, [candidateId]))(candidate)
}

/** Names of those of the candidates that are in the campaign. */
export function candidateNames(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  candidateIds: readonly number[],
): Promise<Map<number, string>> {
  return listCandidateNames(db, permit.campaign.id, candidateIds)
}
