import { sql } from 'kysely'
import { expect, it } from 'vitest'
import { addImagedCandidate, makeScenario } from '@/tests/_support/scenario'
import { lendNext } from './lend-next'

const CANDIDATES = 300
/** Beyond so many numbers from the one before, a name looks as if it came from elsewhere. */
const FAR = 20

const numberOf = ({ name }: { name: string }) => Number(name.slice(3))

it.each([
  ['by need', {}],
  ['by score, where none has one', { queue_order: 'score' as const }],
])(
  'the names of a queue %s jump from anywhere to anywhere, so that a stamp from elsewhere does not stand out',
  async (_, order) => {
    const { db, campaign, graders, permit } = await makeScenario()
    const stamps = new Set<number>()
    for (let n = 1; n <= CANDIDATES; n++) {
      const name = `SWS${String(n).padStart(4, '0')}`
      const id = await addImagedCandidate(db, campaign, name, undefined, 'drawn')
      if (n % 10 === 0) stamps.add(id)
    }
    await sql`update candidate set truth = 'lens' where id in (select value from json_each(${JSON.stringify([...stamps])}))`.execute(
      db,
    )
    await db
      .updateTable('campaign')
      .set({ calibration_share: 0.1, ...order })
      .execute()
    const [jumps, told] = [
      { all: 0, stamps: 0 },
      { all: 0, stamps: 0 },
    ]
    for (const grader of graders) {
      const { candidates } = await lendNext(db, await permit(grader, 'grade'), 40)
      for (const [at, one] of candidates.entries()) {
        const isFar = (other: { name: string } | undefined) => other && Math.abs(numberOf(one) - numberOf(other)) > FAR
        if (!isFar(candidates[at - 1])) continue
        jumps.all += 1
        if (stamps.has(one.id)) jumps.stamps += 1
        // Far from both neighbours, which are near to each other: the mark of a guest.
        const [before, after] = [candidates[at - 1], candidates[at + 1]]
        if (!after || !isFar(after) || Math.abs(numberOf(before) - numberOf(after)) > FAR) continue
        told.all += 1
        if (stamps.has(one.id)) told.stamps += 1
      }
    }
    // 160 looks of which 10 % are at stamps: nearly every step is a jump, at stamps and at candidates alike.
    expect(jumps.all).toBeGreaterThan(80)
    expect(jumps.stamps / jumps.all).toBeLessThan(0.3)
    expect(told.all - told.stamps).toBeGreaterThanOrEqual(told.stamps)
    await db.destroy()
  },
  30_000,
)
