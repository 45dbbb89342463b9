import { afterEach, describe, expect, it } from 'vitest'
import type { Answer } from '@/lib/science/agreement/grades'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { recordGrade } from '@/lib/work/grading/record-grade'
import { lendNext } from '@/lib/work/queue/lend-next'
import { ruleOnCandidate } from '@/lib/work/rulings/rule-on-candidate'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { leaveOut } from './leave-out'
import { runConsensus } from './run-consensus'

const MEAN = { gradesWanted: 3, leastGrades: 2, confirmMean: 2.5, setAsideMean: 0.5, splitSpread: 1.5 }
const RELIABILITY = {
  method: 'reliability',
  gradesWanted: 3,
  leastGrades: 2,
  falseConfirmed: 0.001,
  missedLens: 0.01,
} as const

let scenario: Scenario
let id: number
afterEach(() => scenario.db.destroy())

async function open(rule: object, letters: string): Promise<void> {
  scenario = await makeScenario(rule, 5)
  id = await addImagedCandidate(scenario.db, scenario.campaign, 'SWS1')
  for (const [grader, letter] of [...letters].entries()) await give(grader, letter as Answer)
  await run()
}
const lead = () => scenario.permit(scenario.lead, 'lead')
const run = async () => runConsensus(scenario.db, await lead())
const give = async (grader: number, grade: Answer) =>
  recordGrade(scenario.db, await scenario.permit(scenario.graders[grader], 'grade'), id, GradeInput.parse({ grade }))
const leave = async (grader: number, leftOut: boolean) => {
  await leaveOut(scenario.db, await lead(), { personId: scenario.graders[grader].id, leftOut, reason: 'asleep' })
  await run()
}
const served = async (grader: number) => {
  const { candidates } = await lendNext(scenario.db, await scenario.permit(scenario.graders[grader], 'grade'), 5)
  return candidates.length > 0
}
const state = async () =>
  scenario.db.selectFrom('candidate').select(['state', 'looks_asked']).where('id', '=', id).executeTakeFirstOrThrow()

describe.each([
  ['mean', MEAN],
  ['reliability', RELIABILITY],
] as const)('by the %s method', (_, rule) => {
  it('asks for as many looks as were lost where a candidate is open for want of one, and gives none beyond', async () => {
    await open(rule, 'BNB')
    expect((await state()).state).toBe('split')
    expect(await served(3)).toBe(false)
    await leave(1, true)
    expect(await state()).toEqual({ state: 'open', looks_asked: 4 })
    expect(await served(3)).toBe(true)
    await give(3, 'C')
    expect(await served(4)).toBe(false)
    await run()
    expect((await state()).state).toBe('split')
  })

  it('takes back what was asked for once the person counts again', async () => {
    await open(rule, 'BNB')
    await leave(1, true)
    await leave(1, false)
    expect(await state()).toEqual({ state: 'split', looks_asked: 3 })
    expect(await served(3)).toBe(false)
  })

  it('does not take back a look that somebody holds on their bench; once it has come there is none', async () => {
    await open(rule, 'BNB')
    await leave(1, true)
    expect(await served(3)).toBe(true)
    await leave(1, false)
    expect(await state()).toEqual({ state: 'split', looks_asked: 4 })
    await expect(give(4, 'C')).rejects.toMatchObject({ type: 'candidate-full' })
    expect((await give(3, 'C')).grade.grade).toBe('C')
    await run()
    await expect(give(4, 'C')).rejects.toMatchObject({ type: 'candidate-full' })
  })

  it('takes back at the next run what a lapsed lease held', async () => {
    await open(rule, 'BNB')
    await leave(1, true)
    expect(await served(3)).toBe(true)
    await scenario.db.updateTable('lease').set({ until: '2020-01-01T00:00:00.000Z' }).execute()
    await leave(1, false)
    expect(await state()).toEqual({ state: 'split', looks_asked: 3 })
    await expect(give(3, 'C')).rejects.toMatchObject({ type: 'candidate-full' })
  })

  it('leaves alone what a lead has reopened', async () => {
    await open(rule, 'BNB')
    await ruleOnCandidate(scenario.db, await lead(), id, { outcome: 'open', grade: null, reason: 'look again' })
    await leave(1, true)
    expect(await state()).toEqual({ state: 'open', looks_asked: 4 })
    await leave(1, false)
    expect(await state()).toEqual({ state: 'open', looks_asked: 4 })
  })
})
