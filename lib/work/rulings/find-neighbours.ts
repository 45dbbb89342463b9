import 'server-only'
import type { Kysely } from 'kysely'
import { findNeighbours, type NamedCandidate } from '@/db/queries/candidates'
import type { DB } from '@/db/schema'
import { candidateScope } from '@/lib/work/campaigns/candidate-scope'
import type { CampaignPermit } from '@/lib/work/people/permission'

/** The candidates before and after this one by name, for turning pages: only such as the person's lists hold. */
export function neighboursOf(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  candidateId: number,
): Promise<{ previous: NamedCandidate | null; next: NamedCandidate | null }> {
  return findNeighbours(db, candidateScope(permit), candidateId)
}
