import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { candidateTable } from '@/lib/work/catalogue/candidate-table'
import { catalogueTable } from '@/lib/work/catalogue/catalogue-table'
import { listCandidates } from '@/lib/work/catalogue/list-candidates'
import type { Viewer } from '@/lib/work/people/viewer'
import { candidateEvidence } from '@/lib/work/rulings/candidate-evidence'
import { addJudgedCandidate } from '@/tests/_support/judged-candidate'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { GradeInput } from './grade-input'
import { recordGrade } from './record-grade'

// Grades are independent of each other: who has seen the others' cannot change their own any more.
let scenario: Scenario
let confirmed: number
beforeEach(async () => {
  scenario = await makeScenario({ gradesWanted: 4, leastGrades: 3 })
  confirmed = await addJudgedCandidate(scenario, 'SWS-1', { grades: 'AAA' })
})
afterEach(() => scenario.db.destroy())

const reads = (viewer: Viewer) => scenario.permit(viewer, 'read')
async function correct(viewer: Viewer, grade = 'N', id = confirmed) {
  return recordGrade(scenario.db, await scenario.permit(viewer, 'grade'), id, GradeInput.parse({ grade }))
}
const table = async (viewer: Viewer) =>
  candidateTable(scenario.db, await reads(viewer), {
    filter: {},
    order: 'id',
    descending: false,
    page: 0,
    pageSize: 50,
  })

const SHOWN: [string, (viewer: Viewer) => Promise<unknown>][] = [
  ['the evidence', async (viewer) => candidateEvidence(scenario.db, await reads(viewer), confirmed)],
  ['the table of candidates', table],
  ['the list for scripts', async (viewer) => listCandidates(scenario.db, await reads(viewer), { limit: 10 })],
  ['the catalogue', async (viewer) => catalogueTable(scenario.db, await reads(viewer))],
]

describe('a correction', () => {
  it.each(SHOWN)(
    'is refused once %s has shown the grader what the others said, and nothing changes',
    async (_, show) => {
      const [grader] = scenario.graders
      await show(grader)
      await show(grader)
      await expect(correct(grader)).rejects.toMatchObject({
        status: 409,
        type: 'judgement-seen',
        message: "You have seen the others' grades of this candidate since, so yours stands as you gave it.",
      })
      const grades = await scenario.db.selectFrom('grade').select('grade').execute()
      expect(grades.map(({ grade }) => grade)).toEqual(['A', 'A', 'A'])
      expect(await scenario.db.selectFrom('judgement_shown').select('person_id').execute()).toEqual([
        { person_id: grader.id },
      ])
    },
  )

  it('is taken before anything was shown, and after somebody else was shown it', async () => {
    await candidateEvidence(scenario.db, await reads(scenario.graders[1]), confirmed)
    expect((await correct(scenario.graders[0])).grade.grade).toBe('N')
  })

  it('is taken of a candidate whose rows tell nothing of others: withheld, or open with the own grade only', async () => {
    const [grader, , , fourth] = scenario.graders
    const own = await addImagedCandidate(scenario.db, scenario.campaign, 'SWS-2')
    await correct(grader, 'B', own)
    await table(grader)
    await listCandidates(scenario.db, await reads(grader), { limit: 10 })
    expect((await correct(grader, 'C', own)).grade.grade).toBe('C')
    await correct(fourth, 'U')
    for (const [, show] of SHOWN) await show(fourth)
    expect((await correct(fourth, 'B')).grade.grade).toBe('B')
  })

  it('is refused of an open candidate too when the table shows that others have graded it', async () => {
    const open = await addImagedCandidate(scenario.db, scenario.campaign, 'SWS-2')
    await correct(scenario.graders[0], 'B', open)
    await correct(scenario.graders[1], 'N', open)
    await table(scenario.graders[0])
    await expect(correct(scenario.graders[0], 'N', open)).rejects.toMatchObject({ type: 'judgement-seen' })
  })

  it('is taken from a lead, who sees everything by role', async () => {
    const open = await addImagedCandidate(scenario.db, scenario.campaign, 'SWS-2')
    await correct(scenario.lead, 'B', open)
    await candidateEvidence(scenario.db, await reads(scenario.lead), open)
    expect((await correct(scenario.lead, 'C', open)).grade.grade).toBe('C')
  })

  it('that only repeats what stands is no correction and answers as before', async () => {
    await candidateEvidence(scenario.db, await reads(scenario.graders[0]), confirmed)
    expect((await correct(scenario.graders[0], 'A')).grade.grade).toBe('A')
  })
})

it('shows a grader who could not judge nothing, in the catalogue, the table and the list', async () => {
  const fourth = scenario.graders[3]
  await correct(fourth, 'U')
  expect((await catalogueTable(scenario.db, await reads(fourth))).rows).toEqual([])
  expect((await table(fourth)).rows).toMatchObject([{ withheld: true, state: null, votes: null }])
  const sorted = await listCandidates(scenario.db, await reads(fourth), { limit: 10, state: 'confirmed' })
  expect(sorted.candidates).toEqual([])
  await correct(fourth, 'B')
  expect((await catalogueTable(scenario.db, await reads(fourth))).rows).toMatchObject([{ name: 'SWS-1' }])
})
