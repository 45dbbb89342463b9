import { randomUUID } from 'node:crypto'
import fc from 'fast-check'
import { afterEach, expect, it, vi } from 'vitest'
import { countersAndRecount } from '@/tests/_support/recount-queue'
import { makeSheetScenario, type SheetScenario } from './_sheet-scenario'
import { firstPassOf, type Mark } from './first-pass'
import { giveSheetBack, lendSheet } from './lend-sheet'
import { recordMarks } from './record-marks'

afterEach(() => vi.useRealTimers())

const MARKS: Mark[] = ['sent on', 'dropped', 'taken back']

type Step =
  | { do: 'ask'; person: number; count: number }
  | { do: 'mark'; person: number; pick: number; mark: number; again: boolean }
  | { do: 'leave'; person: number }
  | { do: 'wait'; minutes: number }

const person = fc.nat(1)
const step: fc.Arbitrary<Step> = fc.oneof(
  {
    weight: 4,
    arbitrary: fc.record({ do: fc.constant('ask' as const), person, count: fc.integer({ min: 1, max: 4 }) }),
  },
  {
    weight: 6,
    arbitrary: fc.record({
      do: fc.constant('mark' as const),
      person,
      pick: fc.nat(20),
      mark: fc.nat(2),
      again: fc.boolean(),
    }),
  },
  { weight: 1, arbitrary: fc.record({ do: fc.constant('leave' as const), person }) },
  { weight: 1, arbitrary: fc.record({ do: fc.constant('wait' as const), minutes: fc.integer({ min: 1, max: 30 }) }) },
)

interface Table extends SheetScenario {
  /** The newest mark of each person and candidate. */
  newest: Map<string, Mark>
}

async function take(table: Table, step: Step): Promise<void> {
  if (step.do === 'wait') {
    vi.setSystemTime(Date.now() + step.minutes * 60_000)
    return
  }
  const viewer = table.graders[step.person]
  const permit = await table.permit(viewer, 'grade')
  if (step.do === 'ask') await lendSheet(table.db, permit, step.count)
  else if (step.do === 'leave') await giveSheetBack(table.db, permit)
  else {
    // Whatever lies on whose sheet: marks come late and twice.
    const place = step.pick % table.ids.length
    const mark = { id: randomUUID(), candidate: table.ids[place], mark: MARKS[step.mark] }
    const sent = recordMarks(table.db, permit, [mark])
    table.newest.set(`${step.person} ${place}`, mark.mark)
    await sent
    if (step.again) await recordMarks(table.db, permit, [mark])
  }
}

async function assertInvariants(table: Table): Promise<void> {
  const lent = await table.db
    .selectFrom('sheet_lease')
    .innerJoin('candidate', 'candidate.id', 'sheet_lease.candidate_id')
    .select('candidate.id')
    .where('candidate.truth', 'is', null)
    .where('until', '>', new Date().toISOString())
    .execute()
  expect(new Set(lent.map(({ id }) => id)).size).toBe(lent.length)
  const { kept, counted } = await countersAndRecount(table.db)
  expect(kept).toEqual(counted)
}

it('never gives two people the same candidate at once, loses no mark, and passes over everything in the end', async () => {
  await fc.assert(
    fc.asyncProperty(
      fc.integer({ min: 1, max: 6 }),
      fc.array(fc.array(step, { maxLength: 4 }), { maxLength: 10 }),
      async (n, steps) => {
        vi.useFakeTimers({ toFake: ['Date'], now: new Date('2026-03-01T20:00:00Z') })
        const table: Table = { ...(await makeSheetScenario(n, 2)), newest: new Map() }
        for (const together of steps) {
          // Of each person one after the other, as their outbox sends; the two at once.
          await Promise.all(
            [0, 1].map(async (who) => {
              for (const one of together) if (one.do === 'wait' ? who === 0 : one.person === who) await take(table, one)
            }),
          )
          await assertInvariants(table)
        }
        for (let place = 0; place < n; place++) {
          const marks = [0, 1].flatMap((who) => table.newest.get(`${who} ${place}`) ?? []).map((mark) => ({ mark }))
          expect(await table.stateOf(place)).toBe(firstPassOf(marks))
        }
        vi.setSystemTime(Date.now() + 3_600_000)
        for (let round = 0; round < 20; round++) {
          const permit = await table.permit(table.graders[round % 2], 'grade')
          const { stamps } = await lendSheet(table.db, permit, 3)
          await recordMarks(
            table.db,
            permit,
            stamps.map(({ id }) => ({ id: randomUUID(), candidate: id, mark: 'dropped' as const })),
          )
        }
        for (let place = 0; place < n; place++) expect(await table.stateOf(place)).not.toBe('waiting')
        await assertInvariants(table)
        await table.db.destroy()
      },
    ),
    { numRuns: 40 },
  )
}, 120_000)
