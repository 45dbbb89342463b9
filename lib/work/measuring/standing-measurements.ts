import 'server-only'
import type { Kysely } from 'kysely'
import type { DB } from '@/db/schema'
import { noteShown, revealedTo } from '@/lib/work/grading/may-reveal'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { standingRadii, type StandingRadius } from './standing-radii'

/**
 * The combined Einstein radius of each of these candidates, by candidate, for tables, lists and exports. Calibration candidates are in
 * no answer. To a grader only of decided candidates that they have judged: an open one looks as a calibration stamp does.
 * @param upTo id of the newest measurement there was, for what is frozen
 */
export async function standingMeasurements(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  candidateIds: readonly number[],
  { upTo }: { upTo?: number } = {},
): Promise<Map<number, StandingRadius>> {
  const { campaign, role } = permit
  if (role !== 'grader') return standingRadii(db, campaign.id, candidateIds, { upTo })
  const revealed = [...(await revealedTo(db, permit, candidateIds))]
  const standing = await standingRadii(db, campaign.id, revealed, { upTo, decidedOnly: true })
  await noteShown(db, permit, [...standing.keys()])
  return standing
}
