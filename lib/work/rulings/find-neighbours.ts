import 'server-only'
import type { Kysely } from 'kysely'
import { findNeighbours, type NamedCandidate } from '@/db/queries/candidates'
import type { DB } from '@/db/schema'
import { withCalled } from '@/lib/work/campaigns/called'
import { candidateScope } from '@/lib/work/campaigns/candidate-scope'
import type { CampaignPermit } from '@/lib/work/people/permission'

/**
 * The candidates before and after this one, for turning pages: only such as the person's lists hold, by name. For graders by number,
 * since the order of names would tell those of candidates that they have not judged.
 */
export async function neighboursOf(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  candidateId: number,
): Promise<{ previous: NamedCandidate | null; next: NamedCandidate | null }> {
  const order = permit.role === 'grader' ? 'number' : 'name'
  const { previous, next } = await findNeighbours(db, candidateScope(permit), candidateId, order)
  const called = await withCalled(
    db,
    permit,
    [previous, next].filter((one) => one !== null),
  )
  const asCalled = (one: NamedCandidate | null) => called.find(({ id }) => id === one?.id) ?? null
  return { previous: asCalled(previous), next: asCalled(next) }
}
