import fc from 'fast-check'
import { afterEach, expect, it, vi } from 'vitest'
import { GRADES } from '@/lib/science/agreement/grades'
import { runConsensus } from '@/lib/work/consensus/run-consensus'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { recordGrade } from '@/lib/work/grading/record-grade'
import { Problem } from '@/lib/platform/problems/problem'
import { countersAndRecount } from '@/tests/_support/recount-queue'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { giveBack } from './give-back'
import { LEASE_MS } from './lease-time'
import { lendNext } from './lend-next'

// Invariant 2 of the design: standing first grades never exceed what the campaign wants, however many ask at once.
afterEach(() => vi.useRealTimers())

type Step =
  | { do: 'ask'; person: number; count: number }
  | { do: 'grade'; person: number; pick: number }
  | { do: 'grade unasked'; person: number; pick: number }
  | { do: 'leave'; person: number }
  | { do: 'wait'; minutes: number }
  | { do: 'run' }

const person = fc.nat(3)
const step: fc.Arbitrary<Step> = fc.oneof(
  {
    weight: 4,
    arbitrary: fc.record({ do: fc.constant('ask' as const), person, count: fc.integer({ min: 1, max: 4 }) }),
  },
  { weight: 5, arbitrary: fc.record({ do: fc.constant('grade' as const), person, pick: fc.nat(9) }) },
  { weight: 1, arbitrary: fc.record({ do: fc.constant('grade unasked' as const), person, pick: fc.nat(9) }) },
  { weight: 1, arbitrary: fc.record({ do: fc.constant('leave' as const), person }) },
  { weight: 1, arbitrary: fc.record({ do: fc.constant('wait' as const), minutes: fc.integer({ min: 1, max: 30 }) }) },
)
/** Steps of one inner list start at the same moment. */
const moments = fc.array(fc.array(step, { minLength: 1, maxLength: 5 }), { minLength: 1, maxLength: 12 })

/** Error rates at which one grade can settle a candidate, two that disagree leave it, and a correction unsettles it. */
const RELIABILITY = { method: 'reliability', falseConfirmed: 0.2, missedLens: 0.25 } as const

/** Besides the candidates there are two calibration stamps, which everybody may get, and every third look is to be at one. */
async function openTable(gradesWanted: number, candidates: number, byReliability = false) {
  vi.useFakeTimers({ toFake: ['Date'], now: new Date('2026-03-01T20:00:00Z') })
  const scenario = await makeScenario({ ...(byReliability ? RELIABILITY : {}), gradesWanted, leastGrades: 1 })
  const ids: number[] = []
  for (let n = 0; n < candidates; n++) ids.push(await addImagedCandidate(scenario.db, scenario.campaign, `SWS-${n}`))
  for (const name of ['SWS-90', 'SWS-91']) {
    const id = await addImagedCandidate(scenario.db, scenario.campaign, name)
    await scenario.db.updateTable('candidate').set({ truth: 'lens' }).where('id', '=', id).execute()
  }
  await scenario.db.updateTable('campaign').set({ calibration_share: 0.33 }).execute()
  /** What each person believes to hold, which may have lapsed. */
  const hands = scenario.graders.map(() => new Set<number>())
  return { ...scenario, ids, hands, refused: [] as string[] }
}
type Table = Awaited<ReturnType<typeof openTable>>

async function take(table: Table, step: Step): Promise<void> {
  if (step.do === 'wait') {
    vi.setSystemTime(Date.now() + step.minutes * 60_000)
    return
  }
  if (step.do === 'run') {
    await runConsensus(table.db, await table.permit(table.lead, 'lead'))
    return
  }
  const permit = await table.permit(table.graders[step.person], 'grade')
  const hand = table.hands[step.person]
  if (step.do === 'ask') {
    for (const { id } of (await lendNext(table.db, permit, step.count)).candidates) hand.add(id)
  } else if (step.do === 'leave') {
    await giveBack(table.db, permit)
  } else {
    const choice = step.do === 'grade' ? [...hand] : table.ids
    const id = choice[step.pick % choice.length]
    if (id === undefined) return
    hand.delete(id)
    try {
      await recordGrade(table.db, permit, id, GradeInput.parse({ grade: GRADES[step.pick % GRADES.length] }))
    } catch (error) {
      if (!(error instanceof Problem)) throw error
      table.refused.push(error.type)
    }
  }
}

async function assertInvariants({ db }: Scenario, gradesWanted: number): Promise<void> {
  const now = new Date().toISOString()
  const candidates = await db
    .selectFrom('candidate')
    .select((e) => [
      'candidate.truth',
      'candidate.grades_given as counted',
      e
        .selectFrom('grade')
        .select((g) => g.fn.count<number>('person_id').distinct().as('n'))
        .whereRef('candidate_id', '=', 'candidate.id')
        .as('people'),
      e
        .selectFrom('grade')
        .select((g) => g.fn.countAll<number>().as('n'))
        .whereRef('candidate_id', '=', 'candidate.id')
        .where('replaces', 'is', null)
        .as('firsts'),
      e
        .selectFrom('lease')
        .select((l) => l.fn.countAll<number>().as('n'))
        .whereRef('candidate_id', '=', 'candidate.id')
        .where('until', '>', now)
        .as('lent'),
    ])
    .execute()
  for (const { truth, counted, people, firsts, lent } of candidates) {
    expect(firsts).toBe(counted)
    expect(people).toBe(counted)
    if (truth === null) expect(counted + Number(lent)).toBeLessThanOrEqual(gradesWanted)
  }
  const lentThough = await db
    .selectFrom('lease')
    .innerJoin('grade', (join) =>
      join.onRef('grade.candidate_id', '=', 'lease.candidate_id').onRef('grade.person_id', '=', 'lease.person_id'),
    )
    .select('lease.id')
    .execute()
  expect(lentThough).toEqual([])
  const { kept, counted } = await countersAndRecount(db)
  expect(kept).toEqual(counted)
}

async function gradeUntilNothingIsLeft(table: Table): Promise<void> {
  vi.setSystemTime(Date.now() + LEASE_MS)
  for (let served = true; served;) {
    served = false
    for (const grader of table.graders) {
      const permit = await table.permit(grader, 'grade')
      for (const { id } of (await lendNext(table.db, permit, 2)).candidates) {
        served = true
        const grade = GRADES[(id + grader.id) % GRADES.length]
        await recordGrade(table.db, permit, id, GradeInput.parse({ grade }))
      }
    }
  }
}

it('never goes beyond the wanted number, shows nobody a candidate twice, and serves all in the end', async () => {
  await fc.assert(
    fc.asyncProperty(
      fc.integer({ min: 1, max: 4 }),
      fc.integer({ min: 1, max: 6 }),
      moments,
      fc.constantFrom('most needed' as const, 'score' as const, 'shuffled' as const),
      async (wanted, n, steps, order) => {
        const table = await openTable(wanted, n)
        await table.db.updateTable('campaign').set({ queue_order: order }).execute()
        for (const together of steps) {
          await Promise.all(together.map((step) => take(table, step)))
          await assertInvariants(table, wanted)
        }
        expect(table.refused.every((type) => type === 'candidate-full')).toBe(true)
        await gradeUntilNothingIsLeft(table)
        await assertInvariants(table, wanted)
        const given = await table.db.selectFrom('candidate').select('grades_given').where('truth', 'is', null).execute()
        expect(given.map(({ grades_given }) => grades_given)).toEqual(table.ids.map(() => wanted))
        await table.db.destroy()
      },
    ),
    { numRuns: 40 },
  )
}, 120_000)

it('serves every candidate by the reliability method until it is settled or has the most looks, and none beyond', async () => {
  const withRuns = fc.array(
    fc.array(fc.oneof({ weight: 8, arbitrary: step }, { weight: 1, arbitrary: fc.constant({ do: 'run' as const }) }), {
      minLength: 1,
      maxLength: 5,
    }),
    { minLength: 1, maxLength: 12 },
  )
  let settled = 0
  await fc.assert(
    fc.asyncProperty(
      fc.integer({ min: 1, max: 4 }),
      fc.integer({ min: 1, max: 6 }),
      withRuns,
      async (most, n, steps) => {
        const table = await openTable(most, n, true)
        await take(table, { do: 'run' })
        for (const together of steps) {
          await Promise.all(together.map((step) => take(table, step)))
          await assertInvariants(table, most)
        }
        expect(table.refused.every((type) => type === 'candidate-full')).toBe(true)
        // A run at the end may unsettle some, which then are served again.
        for (const _ of [1, 2, 3]) {
          await gradeUntilNothingIsLeft(table)
          await take(table, { do: 'run' })
        }
        await gradeUntilNothingIsLeft(table)
        await assertInvariants(table, most)
        const ordinary = table.db.selectFrom('candidate').where('truth', 'is', null)
        const rows = await ordinary.select(['grades_given', 'settled']).execute()
        for (const row of rows) expect(row.settled === 1 || row.grades_given === most).toBe(true)
        settled += rows.filter((row) => row.settled === 1 && row.grades_given < most).length
        await table.db.destroy()
      },
    ),
    { numRuns: 30 },
  )
  expect(settled).toBeGreaterThan(0)
}, 120_000)

it('never refuses a grade that is given under a live lease', async () => {
  await fc.assert(
    fc.asyncProperty(fc.integer({ min: 1, max: 4 }), fc.array(step, { maxLength: 25 }), async (wanted, steps) => {
      const table = await openTable(wanted, 4)
      // Without waiting and leaving, what a person was lent stays lent.
      for (const one of steps) if (one.do === 'ask' || one.do === 'grade') await take(table, one)
      expect(table.refused).toEqual([])
      await table.db.destroy()
    }),
    { numRuns: 40 },
  )
}, 120_000)
