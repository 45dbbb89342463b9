import { beforeEach, describe, expect, it } from 'vitest'
import { countOpenCandidates } from '@/db/queries/queue'
import { isoTime } from '@/lib/platform/clock'
import { askerOf } from '@/lib/work/campaigns/asker'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { recordGrade } from '@/lib/work/grading/record-grade'
import { ruleOnCandidate } from '@/lib/work/rulings/rule-on-candidate'
import { countersAndRecount } from '@/tests/_support/recount-queue'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'

let scenario: Scenario
let ids: number[]

beforeEach(async () => {
  scenario = await makeScenario({ gradesWanted: 2, leastGrades: 1 })
  ids = []
  for (let n = 0; n < 4; n++) ids.push(await addImagedCandidate(scenario.db, scenario.campaign, `SWS-${n}`))
})

const give = async (grader: number, n: number, more: Partial<Record<string, unknown>> = {}) =>
  recordGrade(
    scenario.db,
    await scenario.permit(scenario.graders[grader], 'grade'),
    ids[n],
    GradeInput.parse({ grade: 'B', ...more }),
  )

const leftFor = (grader: number) => {
  const rule = { method: 'mean', gradesWanted: 2 } as const
  return countOpenCandidates(scenario.db, askerOf(scenario.campaign, scenario.graders[grader].id, rule, isoTime()))
}

async function expectExact(): Promise<void> {
  const { kept, counted } = await countersAndRecount(scenario.db)
  expect(kept).toEqual(counted)
}

const change = (values: Record<string, unknown>) =>
  scenario.db.updateTable('candidate').set(values).where('id', '=', ids[0]).execute()

describe('the counters of the queue', () => {
  it('tell how many candidates are left to each', async () => {
    await give(0, 0)
    await give(1, 0)
    await give(0, 1)
    expect([await leftFor(0), await leftFor(1), await leftFor(2)]).toEqual([2, 3, 3])
    await expectExact()
  })

  it('count a correction as no look, and a refused grade as none', async () => {
    await give(0, 0)
    await give(0, 0, { grade: 'N' })
    await give(1, 0)
    await expect(give(2, 0)).rejects.toMatchObject({ type: 'candidate-full' })
    expect(await leftFor(0)).toBe(3)
    await expectExact()
  })

  it('leave out what a ruling decides and take it in again when it is handed back', async () => {
    await give(0, 0)
    const lead = await scenario.permit(scenario.lead, 'lead')
    await ruleOnCandidate(scenario.db, lead, ids[0], { outcome: 'confirmed', grade: 'A', reason: 'an arc' })
    expect([await leftFor(0), await leftFor(1)]).toEqual([3, 3])
    await expectExact()
    await ruleOnCandidate(scenario.db, lead, ids[0], { outcome: 'open', grade: null, reason: 'again' })
    expect([await leftFor(0), await leftFor(1)]).toEqual([3, 4])
    await expectExact()
  })

  it.each([{ imaged_at: null }, { truth: 'lens' }, { settled: 1 }, { first_pass: 'dropped' }, { grades_given: 2 }])(
    'follow a candidate that changes: %o',
    async (values) => {
      await give(1, 0)
      await change(values)
      await expectExact()
      await change({ imaged_at: null, truth: null, settled: 0 })
      await change({ imaged_at: isoTime() })
      await expectExact()
    },
  )

  it('forget a candidate that is deleted', async () => {
    await scenario.db.deleteFrom('candidate').where('id', '=', ids[3]).execute()
    expect(await leftFor(0)).toBe(3)
    await expectExact()
  })

  it('stay as they were where a change is taken back', async () => {
    await scenario.db
      .transaction()
      .execute(async (transaction) => {
        await transaction.updateTable('candidate').set({ settled: 1 }).where('id', '=', ids[0]).execute()
        throw new Error('taken back')
      })
      .catch(() => {})
    await expectExact()
    expect(await leftFor(0)).toBe(4)
  })

  it('send on to the bench what somebody has graded, whatever the first pass said', async () => {
    await change({ first_pass: 'dropped' })
    await give(0, 0)
    const row = await scenario.db
      .selectFrom('candidate')
      .select('first_pass')
      .where('id', '=', ids[0])
      .executeTakeFirst()
    expect(row?.first_pass).toBe('sent on')
    await expectExact()
  })
})
