import { afterEach, beforeEach, expect, it } from 'vitest'
import { insertAskedLook } from '@/db/queries/asked-looks'
import { isoTime } from '@/lib/platform/clock'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { candidateTable } from '@/lib/work/catalogue/candidate-table'
import { campaignOverview } from './campaign-overview'
import { listCampaigns } from './list-campaigns'

let scenario: Scenario
beforeEach(async () => {
  scenario = await makeScenario({ gradesWanted: 3, leastGrades: 2 })
})
afterEach(() => scenario.db.destroy())

async function addGrade(candidateId: number, personId: number): Promise<void> {
  const { db, campaign } = scenario
  await db
    .insertInto('grade')
    .values({
      uid: `${candidateId}-${personId}`,
      campaign_id: campaign.id,
      candidate_id: candidateId,
      person_id: personId,
      occasion: 'first',
      grade: 'A',
      tags: '[]',
      reason: null,
      remark: null,
      recipe_id: null,
      view: null,
      seconds: null,
      replaces: null,
      given_at: '2026-01-01T00:00:00.000Z',
    })
    .execute()
  await db
    .updateTable('candidate')
    .set((e) => ({ grades_given: e('grades_given', '+', 1) }))
    .where('id', '=', candidateId)
    .execute()
}

const overviewOf = async (person: Scenario['lead']) =>
  campaignOverview(scenario.db, await scenario.permit(person, 'read'))

it('counts looks given of wanted, and what is left for each person', async () => {
  const { db, campaign, graders } = scenario
  const [first, second] = [await addImagedCandidate(db, campaign, 'A'), await addImagedCandidate(db, campaign, 'B')]
  for (const grader of graders.slice(0, 3)) await addGrade(first, grader.id)
  await addGrade(second, graders[0].id)
  expect((await overviewOf(scenario.lead)).grading).toEqual({ given: 4, wanted: 6, waiting: 1 })
  expect((await overviewOf(graders[0])).mine).toEqual({ left: 0, lookedAt: 2, asked: 0 })
  expect((await overviewOf(graders[1])).mine).toEqual({ left: 1, lookedAt: 1, asked: 0 })
})

it('wants no more looks at what a ruling has decided', async () => {
  const { db, campaign, graders, lead } = scenario
  const id = await addImagedCandidate(db, campaign, 'A')
  await addGrade(id, graders[0].id)
  const ruling = await db
    .insertInto('ruling')
    .values({
      candidate_id: id,
      person_id: lead.id,
      outcome: 'confirmed',
      grade: 'A',
      reason: 'Counter-image',
      created_at: '2026-01-01T00:00:00.000Z',
    })
    .returning('id')
    .executeTakeFirstOrThrow()
  await db.updateTable('candidate').set({ ruling_id: ruling.id }).where('id', '=', id).execute()
  expect((await overviewOf(lead)).grading).toEqual({ given: 1, wanted: 1, waiting: 0 })
  // The home page and the API count as the overview does.
  await addImagedCandidate(db, campaign, 'B')
  expect((await overviewOf(lead)).grading).toEqual({ given: 1, wanted: 4, waiting: 1 })
  expect((await listCampaigns(db, lead))[0]).toMatchObject({ looks: { given: 1, wanted: 4, waiting: 1 } })
})

it('tells a grader no outcome, a viewer no upkeep, and counts calibration stamps for nobody but graders', async () => {
  const { db, campaign, graders, reader, lead } = scenario
  const id = await addImagedCandidate(db, campaign, 'A')
  const hidden = await addImagedCandidate(db, campaign, 'Calibration')
  await db.updateTable('candidate').set({ state: 'confirmed' }).where('id', '=', id).execute()
  await db.updateTable('candidate').set({ truth: 'lens' }).where('id', '=', hidden).execute()
  expect(await overviewOf(graders[0])).toMatchObject({ outcome: null, upkeep: null })
  const seen = await overviewOf(reader)
  expect(seen).toMatchObject({ mine: null, upkeep: null, candidates: 1 })
  expect(seen.outcome?.newestConfirmed).toEqual([{ id, name: 'A' }])
  const forGrader = await overviewOf(graders[0])
  expect(forGrader).toMatchObject({ candidates: 2, imaged: 2, grading: { given: 0, wanted: 6 } })
  const table = { filter: {}, order: 'id', descending: false, page: 0, pageSize: 9 } as const
  expect((await candidateTable(db, await scenario.permit(graders[0], 'read'), table)).all).toBe(forGrader.candidates)
  // What is left is search candidates: stamps are mixed in by their share.
  expect((await listCampaigns(db, graders[0]))[0]).toMatchObject({ candidates: 2, imaged: 2, left: 1 })
  expect((await listCampaigns(db, reader))[0]).toMatchObject({ candidates: 1, imaged: 1 })
  expect((await overviewOf(lead)).upkeep).toEqual({ graders: 5, openInvitations: 0, refusedFiles: 0, jobs: 0 })
})

it('tells no grader how many looks the reliability method still wants, since that falls with the grade that decides', async () => {
  const { db, campaign, graders, lead, reader } = scenario
  await db
    .insertInto('rule')
    .values({
      campaign_id: campaign.id,
      version: 2,
      method: 'reliability',
      grades_wanted: 6,
      least_grades: 2,
      parameters: JSON.stringify({ falseConfirmed: 0.001, missedLens: 0.05 }),
      created_by: lead.id,
      created_at: '2026-01-02T00:00:00.000Z',
    })
    .execute()
  const [settled] = [await addImagedCandidate(db, campaign, 'A'), await addImagedCandidate(db, campaign, 'B')]
  for (const grader of graders.slice(0, 2)) await addGrade(settled, grader.id)
  await db.updateTable('candidate').set({ settled: 1 }).where('id', '=', settled).execute()
  for (const person of [lead, reader]) {
    expect((await overviewOf(person)).grading).toEqual({ given: 2, wanted: 8, waiting: 1 })
    expect((await listCampaigns(db, person))[0].looks).toEqual({ given: 2, wanted: 8, waiting: 1 })
  }
  expect((await overviewOf(graders[0])).grading).toEqual({ given: 2, wanted: null, waiting: null })
  expect((await listCampaigns(db, graders[0]))[0].looks).toEqual({ given: 2, wanted: null, waiting: null })
})

it('tells a person of looks that are asked of them, and nobody else', async () => {
  const { db, campaign, graders, lead, reader } = scenario
  const id = await addImagedCandidate(db, campaign, 'A')
  const now = isoTime()
  const ask = { campaignId: campaign.id, candidateId: id, personId: graders[0].id, askedBy: lead.id, note: null, now }
  await insertAskedLook(db, ask)
  expect((await overviewOf(graders[0])).mine?.asked).toBe(1)
  expect((await listCampaigns(db, graders[0]))[0].asked).toBe(1)
  expect((await overviewOf(graders[1])).mine?.asked).toBe(0)
  expect((await listCampaigns(db, graders[1]))[0].asked).toBe(0)
  expect((await listCampaigns(db, reader))[0].asked).toBeNull()
})

it('is closed to people outside the campaign', async () => {
  await expect(scenario.permit(scenario.stranger, 'read')).rejects.toMatchObject({ status: 404 })
})

it('lists to each person their own campaigns only, with counts as far as the role may know', async () => {
  const { db, campaign, graders, reader, stranger } = scenario
  const id = await addImagedCandidate(db, campaign, 'A')
  await db.updateTable('candidate').set({ state: 'confirmed' }).where('id', '=', id).execute()
  const [forGrader] = await listCampaigns(db, graders[0])
  expect(forGrader).toMatchObject({
    slug: campaign.slug,
    candidates: 1,
    looks: { wanted: 3 },
    left: 1,
    confirmed: null,
  })
  const [forReader] = await listCampaigns(db, reader)
  expect(forReader).toMatchObject({ role: 'viewer', left: null, confirmed: 1, split: 0 })
  expect((await listCampaigns(db, stranger)).map(({ slug }) => slug)).toEqual([scenario.otherCampaign.slug])
  await expect(listCampaigns(db, null)).rejects.toMatchObject({ status: 401 })
})
