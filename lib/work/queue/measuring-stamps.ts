import 'server-only'
import type { Kysely } from 'kysely'
import { countUnseenStamps, hasPractised, listUnseenStamps, type UnseenStamp } from '@/db/queries/mixing'
import type { DB } from '@/db/schema'
import type { Role } from '@/db/schema/people'
import { practiceHalf } from '@/lib/work/calibration/practice-half'

interface Measured {
  campaignId: number
  personId: number
  role: Role
}

/**
 * Calibration stamps that may be mixed into this person's queue: none that they have met, of who practises none of their practice
 * half, and none for leads, whose pages list them with their truth.
 */
export async function measuringStamps(db: Kysely<DB>, who: Measured): Promise<UnseenStamp[]> {
  if (who.role === 'lead') return []
  const stamps = await listUnseenStamps(db, who)
  if (!(await hasPractised(db, who))) return stamps
  const half = await practiceHalf(db, who)
  return stamps.filter(({ id }) => !half.has(id))
}

export async function countMeasuringStamps(db: Kysely<DB>, who: Measured): Promise<number> {
  if (who.role === 'lead') return 0
  return (await hasPractised(db, who)) ? (await measuringStamps(db, who)).length : countUnseenStamps(db, who)
}
