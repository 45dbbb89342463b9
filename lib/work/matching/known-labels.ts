import 'server-only'
import type { Kysely } from 'kysely'
import { listObjectMatches, type ObjectMatchRow } from '@/db/queries/matching'
import { listDecidedAmong } from '@/db/queries/merges'
import type { DB } from '@/db/schema'
import { noteShown, revealedTo } from '@/lib/work/grading/may-reveal'
import type { CampaignPermit } from '@/lib/work/people/permission'

/** A known object at the place of a candidate. */
export type KnownLabel = Omit<ObjectMatchRow, 'candidateId'>

/**
 * What reference lists in force know these candidates as, nearest first; candidates without a match are not in the map. Matches that
 * a lead has told to be different objects are left out. A grader is told of candidates that they have judged and that are decided:
 * calibration stamps, which match nothing, look like open ones.
 */
export async function knownLabels(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  candidateIds: readonly number[],
): Promise<Map<number, KnownLabel[]>> {
  const told = await toldOf(db, permit, candidateIds)
  const labels = new Map<number, KnownLabel[]>()
  if (told.length === 0) return labels
  for (const { candidateId, ...label } of await listObjectMatches(db, told)) {
    if (label.decision === 'different') continue
    const own = labels.get(candidateId)
    if (own) own.push(label)
    else labels.set(candidateId, [label])
  }
  await noteShown(db, permit, [...labels.keys()])
  return labels
}

/** Of these candidates, those of whose matches and merges the person may learn. */
export async function toldOf(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  candidateIds: readonly number[],
): Promise<number[]> {
  if (candidateIds.length === 0) return []
  const revealed = await revealedTo(db, permit, candidateIds)
  return permit.role === 'grader' ? listDecidedAmong(db, permit.campaign.id, [...revealed]) : [...revealed]
}
