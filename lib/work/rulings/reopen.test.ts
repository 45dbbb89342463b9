import { afterEach, beforeEach, expect, it } from 'vitest'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { recordGrade } from '@/lib/work/grading/record-grade'
import type { Viewer } from '@/lib/work/people/viewer'
import { lendNext } from '@/lib/work/queue/lend-next'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { ruleOnCandidate } from './rule-on-candidate'
import type { RulingInput } from './ruling-input'

let scenario: Scenario
let full: number
beforeEach(async () => {
  scenario = await makeScenario({ gradesWanted: 2, leastGrades: 2 })
  full = await addImagedCandidate(scenario.db, scenario.campaign, 'SWS-1')
  for (const grader of scenario.graders.slice(0, 2)) await give(grader)
})
afterEach(() => scenario.db.destroy())

async function give(grader: Viewer) {
  return recordGrade(scenario.db, await scenario.permit(grader, 'grade'), full, GradeInput.parse({ grade: 'B' }))
}
async function rule(outcome: RulingInput['outcome']) {
  const grade = outcome === 'confirmed' ? 'B' : null
  const permit = await scenario.permit(scenario.lead, 'lead')
  return ruleOnCandidate(scenario.db, permit, full, { outcome, grade, reason: 'The arc is faint.' })
}
async function queueOf(grader: Viewer) {
  const { candidates, left } = await lendNext(scenario.db, await scenario.permit(grader, 'grade'), 5)
  return { ids: candidates.map(({ id }) => id), left }
}

it('lends a full candidate to one more grader once a lead reopens it, and takes that grade and no other', async () => {
  const [first, , third, fourth] = scenario.graders
  expect(await queueOf(third)).toEqual({ ids: [], left: 0 })
  await rule('open')
  expect(await queueOf(first)).toEqual({ ids: [], left: 0 })
  expect(await queueOf(third)).toEqual({ ids: [full], left: 1 })
  expect(await queueOf(fourth)).toEqual({ ids: [], left: 1 })
  await expect(give(fourth)).rejects.toMatchObject({ type: 'candidate-full' })
  await give(third)
  expect(await queueOf(fourth)).toEqual({ ids: [], left: 0 })
  await expect(give(fourth)).rejects.toMatchObject({ type: 'candidate-full' })
  await rule('open')
  await give(fourth)
  const row = await scenario.db
    .selectFrom('candidate')
    .select(['grades_given', 'looks_asked'])
    .executeTakeFirstOrThrow()
  expect(row).toEqual({ grades_given: 4, looks_asked: 4 })
})

it('asks once however often it is reopened while the look is outstanding', async () => {
  await rule('open')
  await rule('open')
  await give(scenario.graders[2])
  await expect(give(scenario.graders[3])).rejects.toMatchObject({ type: 'candidate-full' })
})

it.each(['by verdict', 'confirmed', 'set aside'] as const)(
  'takes the look back when the lead rules "%s"',
  async (outcome) => {
    await rule('open')
    await rule(outcome)
    expect(await queueOf(scenario.graders[2])).toEqual({ ids: [], left: 0 })
    await expect(give(scenario.graders[2])).rejects.toMatchObject({ type: 'candidate-full' })
  },
)

it('keeps the place that somebody holds on their bench when the lead rules by verdict', async () => {
  const [, , third, fourth] = scenario.graders
  await rule('open')
  expect((await queueOf(third)).ids).toEqual([full])
  await rule('by verdict')
  await expect(give(fourth)).rejects.toMatchObject({ type: 'candidate-full' })
  expect((await give(third)).grade.grade).toBe('B')
  await expect(give(fourth)).rejects.toMatchObject({ type: 'candidate-full' })
})

it('grants nothing beyond the rule to a candidate that still wants looks', async () => {
  const open = await addImagedCandidate(scenario.db, scenario.campaign, 'SWS-2')
  const permit = await scenario.permit(scenario.lead, 'lead')
  await ruleOnCandidate(scenario.db, permit, open, { outcome: 'open', grade: null, reason: 'Wait.' })
  const row = await scenario.db.selectFrom('candidate').select('looks_asked').where('id', '=', open).executeTakeFirst()
  expect(row?.looks_asked).toBe(0)
})
