import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { runConsensus } from '@/lib/work/consensus/run-consensus'
import { lendNext } from '@/lib/work/queue/lend-next'
import { changeRule } from '@/lib/work/campaigns/change-settings'
import { RuleInput } from '@/lib/work/campaigns/rule-input'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { GradeInput } from './grade-input'
import { recordGrade } from './record-grade'

const RULE = {
  method: 'reliability',
  gradesWanted: 6,
  leastGrades: 2,
  falseConfirmed: 0.001,
  missedLens: 0.01,
} as const
const START = Date.parse('2026-03-01T20:00:00Z')

let scenario: Scenario
let ids: number[]

beforeEach(async () => {
  vi.useFakeTimers({ toFake: ['Date'], now: START })
  scenario = await makeScenario(RULE, 6)
  ids = []
  for (let n = 0; n < 10; n++) ids.push(await addImagedCandidate(scenario.db, scenario.campaign, `SWS${n}`))
})
afterEach(async () => {
  vi.useRealTimers()
  await scenario.db.destroy()
})

const give = async (grader: number, candidate: number, grade: 'A' | 'N' = 'A') =>
  recordGrade(
    scenario.db,
    await scenario.permit(scenario.graders[grader], 'grade'),
    ids[candidate],
    GradeInput.parse({ grade }),
  )
const run = async () => runConsensus(scenario.db, await scenario.permit(scenario.lead, 'lead'))
/** Seconds until the waiting run; null where none waits. */
async function waiting(): Promise<number | null> {
  const job = await scenario.db
    .selectFrom('job')
    .select('run_after')
    .where('kind', '=', 'consensus')
    .where('state', '=', 'queued')
    .executeTakeFirst()
  return job ? (Date.parse(job.run_after) - Date.now()) / 1000 : null
}
const clearJobs = () => scenario.db.deleteFrom('job').execute()

/** As if the newest run had counted so many grades. */
async function runOf(grades: number): Promise<void> {
  await run()
  await clearJobs()
  const newest = await scenario.db
    .selectFrom('run')
    .selectAll()
    .orderBy('id', 'desc')
    .limit(1)
    .executeTakeFirstOrThrow()
  const { id: _, ...row } = newest
  await scenario.db
    .insertInto('run')
    .values({ ...row, summary: JSON.stringify({ grades }) })
    .execute()
}

describe('the consensus is asked for', () => {
  it('two seconds after the first grade of a campaign', async () => {
    await give(0, 0)
    expect(await waiting()).toBe(2)
  })

  it('after a pause that grows with the grades: a thousandth of the time is for runs, and no state waits above ten minutes', async () => {
    await runOf(1_000)
    await give(0, 0)
    expect(await waiting()).toBe(12)
    await clearJobs()
    await runOf(500_000)
    vi.setSystemTime(START + 60_000)
    await give(0, 1)
    expect(await waiting()).toBe(540)
    await clearJobs()
    vi.setSystemTime(START + 700_000)
    await give(0, 2)
    expect(await waiting()).toBe(2)
  })

  it('at once when the grades have grown by a twentieth, which brings a waiting run forward', async () => {
    await runOf(60)
    await runOf(100_000)
    await give(0, 0)
    expect(await waiting()).toBe(600)
    await runOf(60)
    for (const candidate of [1, 2]) await give(0, candidate)
    expect(await waiting()).toBe(2)
  })

  it('at once when no candidate wants another look', async () => {
    await runOf(100_000)
    const last = ids.pop()!
    await scenario.db.updateTable('candidate').set({ settled: 1, look_value: 0 }).where('id', 'in', ids).execute()
    ids = [last]
    for (const grader of [0, 1, 2, 3, 4]) await give(grader, 0, grader % 2 ? 'A' : 'N')
    expect(await waiting()).toBe(600)
    await give(5, 0, 'N')
    expect((await lendNext(scenario.db, await scenario.permit(scenario.lead, 'lead'), 3)).candidates).toEqual([])
    expect(await waiting()).toBe(2)
  })

  it.each(['mean', 'reliability'] as const)(
    'at once when none but calibration stamps want another look, by the method %s',
    async (method) => {
      if (method === 'mean') {
        const lead = await scenario.permit(scenario.lead, 'lead')
        await changeRule(scenario.db, lead, RuleInput.parse({ method, gradesWanted: 6, leastGrades: 1 }))
      }
      await runOf(100_000)
      const stamps = ids.slice(1)
      const unseen = { truth: 'lens', look_value: 0.3 } as const
      await scenario.db.updateTable('candidate').set(unseen).where('id', 'in', stamps).execute()
      for (const grader of [0, 1, 2, 3, 4]) await give(grader, 0, grader % 2 ? 'A' : 'N')
      expect(await waiting()).toBe(600)
      await give(5, 0, 'N')
      expect(await waiting()).toBe(2)
    },
  )

  it('at once when the rule was changed since the newest run', async () => {
    await runOf(100_000)
    await changeRule(
      scenario.db,
      await scenario.permit(scenario.lead, 'lead'),
      RuleInput.parse({ ...RULE, leastGrades: 1 }),
    )
    await clearJobs()
    await give(0, 0)
    expect(await waiting()).toBe(2)
  })
})
