import 'server-only'
import { randomInt } from 'node:crypto'
import type { Kysely } from 'kysely'
import { listPaintedOfNames, setCandidateName } from '@/db/queries/painted-names'
import type { DB } from '@/db/schema'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { freeName } from './free-name'

/**
 * Calibration stamps that were made here give these names up, which a survey delivers for candidates of its own: a stamp takes
 * another free one, and keeps its grades and all else. Call it in the transaction that would match the names.
 */
export async function giveNamesUp(db: Kysely<DB>, campaignId: number, delivered: readonly string[]): Promise<void> {
  for (const { id, name, raDeg, decDeg } of await listPaintedOfNames(db, campaignId, delivered)) {
    const position = raDeg === null || decDeg === null ? null : { raDeg, decDeg }
    const random = new SeededRandom(randomInt(2 ** 32))
    let given = await freeName(db, campaignId, position, 1, random)
    // One that is being delivered as well would be given up again.
    for (let tries = 0; delivered.includes(given) && tries < 40; tries++) {
      given = await freeName(db, campaignId, null, delivered.length + tries, random)
    }
    await setCandidateName(db, id, given)
    const detail = { candidate: id, from: name, to: given }
    await recordEvent(db, { personId: null, campaignId, action: 'calibration.name-given-up', subject: name, detail })
  }
}
