import 'server-only'
import type { Kysely } from 'kysely'
import { findNeighbours, type NamedCandidate } from '@/db/queries/candidates'
import type { DB } from '@/db/schema'
import type { CampaignPermit } from '@/lib/work/people/permission'

/** The candidates before and after this one in order of delivery, for turning pages. */
export function neighboursOf(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  candidateId: number,
): Promise<{ previous: NamedCandidate | null; next: NamedCandidate | null }> {
  return findNeighbours(db, permit.campaign.id, candidateId)
}
