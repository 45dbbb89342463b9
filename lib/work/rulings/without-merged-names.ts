import 'server-only'
import type { Kysely } from 'kysely'
import { listDecidedAmong, listRulingsOfMerges } from '@/db/queries/merges'
import type { RulingWithName } from '@/db/queries/rulings'
import type { DB } from '@/db/schema'
import { revealedTo } from '@/lib/work/grading/may-reveal'
import type { CampaignPermit } from '@/lib/work/people/permission'

const SAYS = {
  merged: 'The same object as another candidate: merged into it.',
  parted: 'Parted again from another candidate.',
}

/**
 * Rulings as a grader may read them: the ruling of a merge names the candidate that was kept. Where they have not judged that one, or
 * it is open, they are told neither that nor what the lead wrote about the two: an open one that merges is no calibration stamp.
 */
export async function withoutMergedNames(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  rulings: readonly RulingWithName[],
): Promise<RulingWithName[]> {
  const merges = await listRulingsOfMerges(
    db,
    rulings.map(({ id }) => id),
  )
  if (merges.length === 0) return [...rulings]
  const revealed = await revealedTo(db, permit, [...new Set(merges.map(({ keptId }) => keptId))])
  const told = new Set(await listDecidedAmong(db, permit.campaign.id, [...revealed]))
  const hidden = new Map(merges.flatMap((merge) => (told.has(merge.keptId) ? [] : [[merge.rulingId, merge.event]])))
  return rulings.map((ruling) => {
    const event = hidden.get(ruling.id)
    return event === undefined ? ruling : { ...ruling, reason: SAYS[event] }
  })
}
