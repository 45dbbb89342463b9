import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { insertRepeatLooks } from '@/db/queries/repeats'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { recordGrade } from '@/lib/work/grading/record-grade'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { ownRecord, recordOfGrader } from './grader-record'
import { answerPractice, practiceState } from './practice'
import { selfConsistency } from './self-consistency'

let scenario: Scenario
let ids: number[]
beforeEach(async () => {
  scenario = await makeScenario()
  ids = []
  for (let n = 0; n < 12; n++) ids.push(await addImagedCandidate(scenario.db, scenario.campaign, `SWS${n}`))
  await scenario.db.updateTable('candidate').set({ truth: 'lens' }).where('id', 'in', ids.slice(0, 7)).execute()
})
afterEach(() => scenario.db.destroy())

const permitOf = (grader: number) => scenario.permit(scenario.graders[grader], 'grade')
const give = async (grader: number, id: number, input: Record<string, unknown>) =>
  recordGrade(scenario.db, await permitOf(grader), id, GradeInput.parse(input))

describe('a grader’s record', () => {
  it('counts grades, looks a day and pace', async () => {
    await give(0, ids[8], { grade: 'A', seconds: 4 })
    await give(0, ids[9], { grade: 'N', seconds: 10 })
    await give(0, ids[9], { grade: 'C', seconds: 2 })
    const record = await ownRecord(scenario.db, await permitOf(0))
    expect(record.looks).toBe(2)
    expect(record.grades).toEqual([
      { letter: 'A', n: 1 },
      { letter: 'B', n: 0 },
      { letter: 'C', n: 1 },
      { letter: 'N', n: 0 },
      { letter: 'U', n: 0 },
    ])
    expect(record.medianSeconds).toBe(7)
    expect(record.days).toEqual([{ day: new Date().toISOString().slice(0, 10), n: 2 }])
  })

  it('shows themselves their calibration results in whole steps of five, and leads all at once', async () => {
    const lead = await scenario.permit(scenario.lead, 'lead')
    for (const id of ids.slice(0, 4)) await give(0, id, { grade: 'A' })
    expect(await ownRecord(scenario.db, await permitOf(0))).toMatchObject({ notYet: true, calibration: { answers: 0 } })
    expect((await recordOfGrader(scenario.db, lead, scenario.graders[0].id)).calibration.lensesSeen.n).toBe(4)
    for (const id of ids.slice(4, 7)) await give(0, id, { grade: 'N' })
    const own = await ownRecord(scenario.db, await permitOf(0))
    expect(own.calibration.lensesSeen).toMatchObject({ n: 4, of: 5 })
    expect((await recordOfGrader(scenario.db, lead, scenario.graders[0].id)).calibration.lensesSeen).toMatchObject({
      n: 4,
      of: 7,
    })
  })

  it('takes calibration answers as they were first: a correction after the truth is known changes nothing', async () => {
    const lead = await scenario.permit(scenario.lead, 'lead')
    await give(0, ids[0], { grade: 'N' })
    await give(0, ids[0], { grade: 'A' })
    expect((await recordOfGrader(scenario.db, lead, scenario.graders[0].id)).calibration.lensesSeen.n).toBe(0)
  })

  it('holds practice for the person alone: a lead is not told of it', async () => {
    const permit = await permitOf(0)
    const { next } = await practiceState(scenario.db, permit)
    await answerPractice(scenario.db, permit, next!.id, { grade: 'A', id: 'practised-once', seconds: 1 })
    expect((await ownRecord(scenario.db, permit)).practice?.lensesSeen).toMatchObject({ n: 1, of: 1 })
    const lead = await scenario.permit(scenario.lead, 'lead')
    expect((await recordOfGrader(scenario.db, lead, scenario.graders[0].id)).practice).toBeNull()
  })

  it('tells self-consistency from what came back', async () => {
    const who = { campaignId: scenario.campaign.id, personId: scenario.graders[0].id }
    await give(0, ids[8], { grade: 'A' })
    await insertRepeatLooks(scenario.db, who, [{ candidateId: ids[8], turned: 1 }], '2026-01-02T00:00:00.000Z')
    await give(0, ids[8], { grade: 'B', turned: 1 })
    expect((await ownRecord(scenario.db, await permitOf(0))).consistency).toMatchObject({
      pairs: 1,
      same: { n: 0, of: 1 },
      near: { n: 1, of: 1 },
    })
  })

  it('of others is for leads: graders and viewers get no permit, and leads find nobody of elsewhere', async () => {
    for (const person of [scenario.graders[0], scenario.reader]) {
      await expect(scenario.permit(person, 'lead')).rejects.toMatchObject({ status: 403 })
    }
    const lead = await scenario.permit(scenario.lead, 'lead')
    for (const person of [scenario.stranger, scenario.reader]) {
      await expect(recordOfGrader(scenario.db, lead, person.id)).rejects.toMatchObject({ status: 404 })
    }
  })
})

// Cohen 1968, worked by hand: 4 pairs, A-A, A-A, N-N, C-N. Observed squared distance 1 of 4 pairs; by chance, from the margins
// (A 2, C 1, N 1; A 2, N 2): (2*2*9 + 1*2*4 + 1*2*1 + 1*2*9) / 4 = 16 over four pairs. kappa = 1 - 1 / 16.
it('self-consistency is Cohen’s kappa with squared weights, and leaves out what could not be judged', () => {
  const found = selfConsistency([
    { first: 'A', again: 'A' },
    { first: 'A', again: 'A' },
    { first: 'N', again: 'N' },
    { first: 'C', again: 'N' },
    { first: 'U', again: 'A' },
  ])
  expect(found).toMatchObject({ pairs: 4, same: { n: 3, of: 4 }, near: { n: 4, of: 4 } })
  expect(found.kappa).toBeCloseTo(1 - 1 / 16, 12)
})
