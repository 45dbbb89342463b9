import 'server-only'
import { createHmac, randomBytes } from 'node:crypto'
import type { Kysely } from 'kysely'
import { queueSecret } from '@/db/queries/mixing'
import type { DB } from '@/db/schema'

interface Who {
  campaignId: number
  personId: number
}

export interface PracticeHalf {
  /** Whether the stamp is one to practise on for this person; else it is one to be measured by. */
  has: (stampId: number) => boolean
  /** In which order they come in practice. */
  placeOf: (stampId: number) => string
}

/** Of people, and of stamps of a person: places are worked out again when they are needed again. */
const MOST_KEPT = 200
const kept = new Map<string, Map<number, string>>()

/**
 * Half of a campaign's calibration stamps are for a person to practise on and half to be measured by, each stamp drawn for itself and for
 * good, and not to be foretold without the site's secret. So practice tells nothing of what may lie on the bench.
 */
export async function practiceHalf(db: Kysely<DB>, { campaignId, personId }: Who): Promise<PracticeHalf> {
  const secret = await queueSecret(db, () => randomBytes(32).toString('base64url'))
  const who = `practice:${campaignId}:${personId}`
  const key = `${secret} ${who}`
  if (!kept.has(key) && kept.size >= MOST_KEPT) kept.clear()
  const places = kept.get(key) ?? new Map<number, string>()
  kept.set(key, places)
  const placeOf = (stampId: number): string => {
    const known = places.get(stampId)
    if (known !== undefined) return known
    const place = createHmac('sha256', secret).update(`${who}:${stampId}`).digest('hex')
    places.set(stampId, place)
    return place
  }
  return { placeOf, has: (stampId) => placeOf(stampId) < '8' }
}
