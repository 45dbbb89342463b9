import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { insertRepeatLooks, listRepeatPairs } from '@/db/queries/repeats'
import { runConsensus } from '@/lib/work/consensus/run-consensus'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { GradeInput } from './grade-input'
import { ownAnswer } from './own-answer'
import { recordGrade } from './record-grade'

let scenario: Scenario
let id: number
beforeEach(async () => {
  scenario = await makeScenario({ gradesWanted: 2, leastGrades: 1 })
  id = await addImagedCandidate(scenario.db, scenario.campaign, 'SWS0001')
})
afterEach(() => scenario.db.destroy())

const permit = () => scenario.permit(scenario.graders[0], 'grade')
const who = () => ({ campaignId: scenario.campaign.id, personId: scenario.graders[0].id })
const give = async (input: Record<string, unknown>) =>
  recordGrade(scenario.db, await permit(), id, GradeInput.parse(input))
const comeBack = () =>
  insertRepeatLooks(scenario.db, who(), [{ candidateId: id, turned: 3 }], '2026-01-02T00:00:00.000Z')
const grades = () => scenario.db.selectFrom('grade').select(['occasion', 'grade', 'replaces']).orderBy('id').execute()

describe('the answer to a candidate that came back', () => {
  it('is kept beside the first grade, which stands', async () => {
    await give({ grade: 'A' })
    await comeBack()
    expect((await give({ grade: 'C', turned: 3 })).grade.grade).toBe('C')
    expect(await grades()).toEqual([
      { occasion: 'first', grade: 'A', replaces: null },
      { occasion: 'repeat', grade: 'C', replaces: null },
    ])
    expect((await ownAnswer(scenario.db, await permit(), id)).answer?.grade).toBe('A')
    expect(await listRepeatPairs(scenario.db, who())).toEqual([{ first: 'A', again: 'C' }])
  })

  it('takes no place, changes no verdict and asks for no run', async () => {
    await give({ grade: 'A' })
    await comeBack()
    const lead = await scenario.permit(scenario.lead, 'lead')
    await runConsensus(scenario.db, lead)
    const verdicts = () => scenario.db.selectFrom('verdict').selectAll().execute()
    const before = await verdicts()
    await scenario.db.deleteFrom('job').execute()
    await give({ grade: 'N', turned: 3 })
    const { grades_given } = await scenario.db.selectFrom('candidate').select('grades_given').executeTakeFirstOrThrow()
    expect(grades_given).toBe(1)
    expect(await scenario.db.selectFrom('job').select('kind').execute()).toEqual([])
    await runConsensus(scenario.db, lead)
    expect(await verdicts()).toEqual(before)
    expect(before.map(({ mean }) => mean)).toEqual([3])
  })

  it('is corrected by another answer to the same look, and delivered once', async () => {
    await give({ grade: 'A' })
    await comeBack()
    const first = await give({ grade: 'N', turned: 3, id: 'repeat-once' })
    expect(await give({ grade: 'N', turned: 3, id: 'repeat-once' })).toEqual(first)
    expect((await give({ grade: 'B', turned: 3 })).replaced).toBe('repeat-once')
    expect(await grades()).toHaveLength(3)
    expect(await listRepeatPairs(scenario.db, who())).toEqual([{ first: 'A', again: 'B' }])
  })

  it('is refused of another turn than was shown, and with the id of another grade', async () => {
    await give({ grade: 'A', id: 'the-first-one' })
    await comeBack()
    await expect(give({ grade: 'N', turned: 2 })).rejects.toMatchObject({ status: 409, type: 'no-repeat' })
    await expect(give({ grade: 'N', turned: 3, id: 'the-first-one' })).rejects.toMatchObject({
      status: 409,
      type: 'grade-id-taken',
    })
    expect(await grades()).toHaveLength(1)
  })

  it('makes a pair with the first grade as it stood then, whatever that is corrected to', async () => {
    await give({ grade: 'B' })
    await give({ grade: 'A' })
    await comeBack()
    await give({ grade: 'C', turned: 3 })
    await give({ grade: 'C' })
    expect(await listRepeatPairs(scenario.db, who())).toEqual([{ first: 'A', again: 'C' }])
  })

  it('is refused where nothing came back, and changes nothing', async () => {
    await give({ grade: 'A' })
    await expect(give({ grade: 'N', turned: 3 })).rejects.toMatchObject({ status: 409, type: 'no-repeat' })
    expect(await grades()).toHaveLength(1)
    expect(GradeInput.safeParse({ grade: 'N', turned: 8 }).success).toBe(false)
  })

  it('leaves a correction of the first grade what it was: without a turn it is one', async () => {
    await give({ grade: 'A' })
    await comeBack()
    await give({ grade: 'B' })
    expect(await grades()).toMatchObject([{ occasion: 'first' }, { occasion: 'first', grade: 'B' }])
    expect(await listRepeatPairs(scenario.db, who())).toEqual([])
  })
})
