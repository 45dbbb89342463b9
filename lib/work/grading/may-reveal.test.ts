import { expect, it } from 'vitest'
import { addImagedCandidate, makeScenario } from '@/tests/_support/scenario'
import { GradeInput } from './grade-input'
import { revealedTo } from './may-reveal'
import { recordGrade } from './record-grade'

async function graded() {
  const scenario = await makeScenario()
  const { db, campaign, graders } = scenario
  const ids = [await addImagedCandidate(db, campaign, 'SWS-1'), await addImagedCandidate(db, campaign, 'SWS-2')]
  const own = await scenario.permit(graders[0], 'read')
  const permit = await scenario.permit(graders[0], 'grade')
  const give = (id: number, grade: string) => recordGrade(db, permit, id, GradeInput.parse({ grade }))
  return { ...scenario, ids, own, give }
}

it('shows a grader the grades of what they have judged themselves, and of nothing else', async () => {
  const { db, ids, own, give } = await graded()
  expect(await revealedTo(db, own, ids)).toEqual(new Set())
  await give(ids[0], 'B')
  expect(await revealedTo(db, own, ids)).toEqual(new Set([ids[0]]))
})

it('reveals nothing for a cannot-judge, and forgets what was revealed when a grade is corrected to one', async () => {
  const { db, ids, own, give } = await graded()
  await give(ids[0], 'U')
  expect(await revealedTo(db, own, ids)).toEqual(new Set())
  await give(ids[0], 'C')
  expect(await revealedTo(db, own, ids)).toEqual(new Set([ids[0]]))
  await give(ids[0], 'U')
  expect(await revealedTo(db, own, ids)).toEqual(new Set())
})

it('keeps the grade of one grader from opening the candidate to another', async () => {
  const scenario = await graded()
  await scenario.give(scenario.ids[0], 'A')
  const other = await scenario.permit(scenario.graders[1], 'read')
  expect(await revealedTo(scenario.db, other, scenario.ids)).toEqual(new Set())
})

it('shows leads and viewers every candidate of their campaign, and none of another', async () => {
  const scenario = await graded()
  const foreign = await addImagedCandidate(scenario.db, scenario.otherCampaign, 'SWS-9')
  for (const viewer of [scenario.lead, scenario.reader]) {
    const permit = await scenario.permit(viewer, 'read')
    expect(await revealedTo(scenario.db, permit, [...scenario.ids, foreign])).toEqual(new Set(scenario.ids))
  }
})
