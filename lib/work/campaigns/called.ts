import 'server-only'
import type { Kysely } from 'kysely'
import { listNamedTo } from '@/db/queries/told-names'
import type { DB } from '@/db/schema'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { candidateNumber } from './candidate-number'

interface Named {
  id: number
  name: string
}

/**
 * The one place that decides what each of these candidates is called to whom. Leads and viewers are told names, viewers of no
 * calibration stamp. A grader is told the name of what they have judged or are asked by name to look at, and before that a number:
 * names follow the survey's numbering, and in one without gaps those of calibration stamps can only lie behind the last.
 */
export async function calledTo(
  db: Kysely<DB>,
  { campaign, viewer, role }: CampaignPermit<'read'>,
  candidateIds: readonly number[],
): Promise<(candidate: Named) => string> {
  if (role !== 'grader') return ({ name }) => name
  const told = new Set(await listNamedTo(db, campaign.id, viewer.id, candidateIds))
  return ({ id, name }) => (told.has(id) ? name : candidateNumber(id))
}

/** The candidates with what each is called to this person in place of its name. */
export async function withCalled<C extends Named>(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  candidates: readonly C[],
): Promise<C[]> {
  const called = await calledTo(
    db,
    permit,
    candidates.map(({ id }) => id),
  )
  return candidates.map((candidate) => ({ ...candidate, name: called(candidate) }))
}
