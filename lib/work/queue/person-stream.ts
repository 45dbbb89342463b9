import 'server-only'
import { createHmac, randomBytes } from 'node:crypto'
import type { Kysely } from 'kysely'
import { queueSecret } from '@/db/queries/mixing'
import type { DB } from '@/db/schema'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'

/** Two even numbers in [0, 1) for each place of a queue: what comes there, and which of what may come. */
export interface PlaceDraw {
  kind: number
  pick: number
}

/**
 * The draws of a person's queue in a campaign, place by place: the same for the same site, person and place, so that asking again
 * does not draw again, and not to be foretold without the site's secret.
 */
export class PersonStream {
  readonly #draws: PlaceDraw[] = []
  readonly #random: SeededRandom
  constructor(secret: string, campaignId: number, personId: number) {
    const digest = createHmac('sha256', secret).update(`${campaignId}:${personId}`).digest()
    this.#random = SeededRandom.fromState([
      digest.readUInt32LE(0),
      digest.readUInt32LE(4),
      digest.readUInt32LE(8),
      digest.readUInt32LE(12) | 1,
    ])
  }

  at(place: number): PlaceDraw {
    while (this.#draws.length <= place) {
      this.#draws.push({ kind: this.#random.uniform(), pick: this.#random.uniform() })
    }
    return this.#draws[place]
  }
}

/** Streams are made again when they are needed again: this only spares the work. */
const MOST_KEPT = 500
const kept = new Map<string, PersonStream>()

export async function personStream(db: Kysely<DB>, campaignId: number, personId: number): Promise<PersonStream> {
  const secret = await queueSecret(db, () => randomBytes(32).toString('base64url'))
  const key = `${secret} ${campaignId} ${personId}`
  const known = kept.get(key)
  if (known) return known
  if (kept.size >= MOST_KEPT) kept.clear()
  const stream = new PersonStream(secret, campaignId, personId)
  kept.set(key, stream)
  return stream
}

/** What the random order of a person's queue in a campaign is made of: 32 bits that do not change. */
export async function orderSeed(db: Kysely<DB>, campaignId: number, personId: number): Promise<number> {
  const secret = await queueSecret(db, () => randomBytes(32).toString('base64url'))
  return createHmac('sha256', secret).update(`order:${campaignId}:${personId}`).digest().readInt32LE(0)
}
