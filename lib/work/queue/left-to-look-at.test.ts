import { afterEach, beforeEach, expect, it } from 'vitest'
import { listCampaigns } from '@/lib/work/campaigns/list-campaigns'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { withLeft } from './left-to-look-at'
import { lendNext } from './lend-next'

let scenario: Scenario
beforeEach(async () => {
  scenario = await makeScenario()
  const { db, campaign } = scenario
  for (let n = 0; n < 40; n++) await addImagedCandidate(db, campaign, `SWS-${n}`)
  for (let n = 0; n < 20; n++) await addImagedCandidate(db, campaign, `SWS-9${n}`)
  await db.updateTable('candidate').set({ truth: 'lens' }).where('name', 'like', 'SWS-9_%').execute()
  await db.updateTable('campaign').set({ calibration_share: 0.5 }).execute()
  await db.insertInto('site').values({ key: 'queue-secret', value: 'known to this test' }).execute()
})
afterEach(() => scenario.db.destroy())

it('a person’s campaigns say what is left as their bench does, calibration stamps among it', async () => {
  const [grader] = scenario.graders
  const [card] = await withLeft(scenario.db, grader, await listCampaigns(scenario.db, grader))
  const bench = await lendNext(scenario.db, await scenario.permit(grader, 'grade'), 5)
  expect(card.left).toBe(bench.left)
  expect(bench.left).toBeGreaterThan(40)
})

it('a viewer has nothing left, and is told so without a number', async () => {
  const [card] = await withLeft(scenario.db, scenario.reader, await listCampaigns(scenario.db, scenario.reader))
  expect(card.left).toBeNull()
})
