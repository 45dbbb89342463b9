import { afterEach, beforeEach, expect, it } from 'vitest'
import { candidateEvidence } from '@/lib/work/rulings/candidate-evidence'
import { addJudgedCandidate } from '@/tests/_support/judged-candidate'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { GradeInput } from './grade-input'
import { ownAnswer } from './own-answer'
import { recordGrade } from './record-grade'

let scenario: Scenario
let candidate: number
beforeEach(async () => {
  scenario = await makeScenario({ gradesWanted: 4, leastGrades: 3 })
  candidate = await addJudgedCandidate(scenario, 'SWS-1', { grades: 'ABN' })
})
afterEach(() => scenario.db.destroy())

const own = async (grader: number, id = candidate) =>
  ownAnswer(scenario.db, await scenario.permit(scenario.graders[grader], 'grade'), id)

it('tells a grader what stands of their own, the newest correction, and nothing of the others', async () => {
  const permit = await scenario.permit(scenario.graders[0], 'grade')
  const input = GradeInput.parse({ grade: 'C', tags: ['arc'], remark: 'fainter than it looked' })
  await recordGrade(scenario.db, permit, candidate, input)
  const told = await own(0)
  expect(told).toMatchObject({
    answer: { grade: 'C', tags: ['arc'], remark: 'fainter than it looked', reason: null },
    open: true,
  })
  expect(Object.keys(told)).toEqual(['answer', 'open'])
})

it('says that it stands for good once the grader has been shown the others’ judgement', async () => {
  await candidateEvidence(scenario.db, await scenario.permit(scenario.graders[0], 'read'), candidate)
  expect(await own(0)).toMatchObject({ answer: { grade: 'A' }, open: false })
  expect(await own(1)).toMatchObject({ answer: { grade: 'B' }, open: true })
})

it('is empty where nothing was graded, and notes nothing as shown', async () => {
  const fresh = await addImagedCandidate(scenario.db, scenario.campaign, 'SWS-2')
  expect(await own(0, fresh)).toEqual({ answer: null, open: true })
  expect(await scenario.db.selectFrom('judgement_shown').select('person_id').execute()).toEqual([])
})

it('is refused for a candidate of another campaign', async () => {
  await expect(own(0, 9999)).rejects.toMatchObject({ status: 404 })
})
