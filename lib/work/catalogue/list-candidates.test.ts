import { afterEach, beforeEach, expect, it } from 'vitest'
import { candidateNumber } from '@/lib/work/campaigns/candidate-number'
import { addCalibrationCandidate, addJudgedCandidate, giveGrades } from '@/tests/_support/judged-candidate'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { listCandidates } from './list-candidates'

let scenario: Scenario
beforeEach(async () => {
  scenario = await makeScenario({ gradesWanted: 4, leastGrades: 3 })
})
afterEach(() => scenario.db.destroy())

async function listFor(viewer: Scenario['lead'], input: Partial<Parameters<typeof listCandidates>[2]> = {}) {
  const permit = await scenario.permit(viewer, 'read')
  return listCandidates(scenario.db, permit, { limit: 100, ...input })
}

it('walks through all candidates once, page by page, and ends with no cursor', async () => {
  for (const name of ['a', 'b', 'c', 'd', 'e']) await addImagedCandidate(scenario.db, scenario.campaign, name)
  const names: string[] = []
  let cursor: string | undefined
  for (let page = 0; page < 3; page++) {
    const answer = await listFor(scenario.lead, { limit: 2, cursor })
    names.push(...answer.candidates.map((candidate) => candidate.name))
    cursor = answer.nextCursor ?? undefined
  }
  expect(names).toEqual(['a', 'b', 'c', 'd', 'e'])
  expect(cursor).toBeUndefined()
})

it('does not offer another page when the last one is exactly full', async () => {
  for (const name of ['a', 'b']) await addImagedCandidate(scenario.db, scenario.campaign, name)
  expect((await listFor(scenario.lead, { limit: 2 })).nextCursor).toBeNull()
})

it.each(['', 'x', '17', 'YWZ0ZXI6MA', 'YWZ0ZXI6MQ==', 'YWZ0ZXI6LTE'])(
  'refuses the cursor "%s" with a sentence',
  async (cursor) => {
    await expect(listFor(scenario.lead, { cursor })).rejects.toMatchObject({
      status: 422,
      message: expect.stringContaining('nextCursor'),
    })
  },
)

it('tells leads and viewers the verdict with its reason, and a grader only after their own grade', async () => {
  const id = await addJudgedCandidate(scenario, 'judged', { grades: 'AAB ' })
  const [forLead] = (await listFor(scenario.lead)).candidates
  expect(forLead).toMatchObject({
    state: 'confirmed',
    withheld: false,
    verdict: { outcome: 'confirmed', grades: 3, cannotJudge: 0 },
  })
  expect(forLead.verdict?.mean).toBeCloseTo(8 / 3, 12)
  expect(forLead.verdict?.reason).toMatch(/^Confirmed/)
  expect(forLead.designation).toMatch(/^SWS J/)
  expect((await listFor(scenario.reader)).candidates[0]).toMatchObject({ state: 'confirmed', withheld: false })
  expect((await listFor(scenario.graders[0])).candidates[0]).toMatchObject({ state: 'confirmed', withheld: false })
  const [withheld] = (await listFor(scenario.graders[3])).candidates
  expect(withheld).toMatchObject({
    state: null,
    verdict: null,
    designation: null,
    withheld: true,
    name: candidateNumber(id),
  })
})

it("does not count 'cannot judge' as a grade that opens the verdict", async () => {
  await addJudgedCandidate(scenario, 'judged', { grades: 'AAAU' })
  expect((await listFor(scenario.graders[3])).candidates[0]).toMatchObject({ withheld: true, state: null })
})

it('finds candidates by state, and for a grader only among those they have judged', async () => {
  await addJudgedCandidate(scenario, 'mine', { grades: 'AAA ' })
  await addJudgedCandidate(scenario, 'not mine', { grades: ' AAA' })
  await addJudgedCandidate(scenario, 'set aside', { grades: 'NNN ' })
  const names = async (viewer: Scenario['lead']) =>
    (await listFor(viewer, { state: 'confirmed' })).candidates.map((candidate) => candidate.name)
  expect(await names(scenario.lead)).toEqual(['mine', 'not mine'])
  expect(await names(scenario.graders[0])).toEqual(['mine'])
})

it('tells score and calibration to leads and to nobody else', async () => {
  await addJudgedCandidate(scenario, 'judged', { grades: 'AAA ' })
  expect((await listFor(scenario.lead)).candidates[0]).toMatchObject({ score: null, calibration: false })
  for (const viewer of [scenario.reader, scenario.graders[0]]) {
    const [candidate] = (await listFor(viewer)).candidates
    expect(candidate).not.toHaveProperty('score')
    expect(candidate).not.toHaveProperty('calibration')
  }
})

it('shows a calibration candidate to a lead with its mark, to a viewer not at all, to a grader like any other', async () => {
  await addImagedCandidate(scenario.db, scenario.campaign, 'plain')
  await addCalibrationCandidate(scenario, 'calibration')
  expect((await listFor(scenario.lead)).candidates.map((candidate) => candidate.calibration)).toEqual([false, true])
  expect((await listFor(scenario.reader)).candidates.map((candidate) => candidate.name)).toEqual(['plain'])
  const alike = async () =>
    (await listFor(scenario.graders[0])).candidates.map(({ id: _id, name: _name, ...rest }) => JSON.stringify(rest))
  const [plain, calibration] = await alike()
  expect(calibration).toBe(plain)
  for (const { id } of (await listFor(scenario.lead)).candidates) await giveGrades(scenario, id, { grades: 'B' })
  const [plainAfter, calibrationAfter] = await alike()
  expect(calibrationAfter).toBe(plainAfter)
  expect(calibrationAfter).toContain('"withheld":false')
})

it('holds no candidate of another campaign, and nothing at all for a stranger', async () => {
  await addImagedCandidate(scenario.db, scenario.otherCampaign, 'elsewhere')
  expect((await listFor(scenario.lead)).candidates).toEqual([])
  await expect(listFor(scenario.stranger)).rejects.toMatchObject({ status: 404 })
})
