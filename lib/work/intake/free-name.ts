import 'server-only'
import type { Kysely } from 'kysely'
import { listNamesOfEnds } from '@/db/queries/calibration'
import { listCandidateNames } from '@/db/queries/cutouts'
import type { DB } from '@/db/schema'
import type { SeededRandom } from '@/lib/science/lensing/seeded-random'
import type { SkyPosition } from '@/lib/science/sky/separation'
import { proposeNames } from './stamp-name'

/** A name for a calibration stamp that no candidate of the campaign has. @param stamps how many are being named. */
export async function freeName(
  db: Kysely<DB>,
  campaignId: number,
  position: SkyPosition | null,
  stamps: number,
  random: SeededRandom,
): Promise<string> {
  const proposed = proposeNames(await listNamesOfEnds(db, campaignId), position, stamps, random)
  const taken = new Set(await listCandidateNames(db, campaignId, proposed))
  const free = proposed.find((name) => !taken.has(name))
  if (free === undefined) throw new Error('No free name was found for a calibration stamp')
  return free
}
