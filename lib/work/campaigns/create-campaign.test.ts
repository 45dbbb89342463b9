import { afterEach, beforeEach, expect, it } from 'vitest'
import { makeScenario, type Scenario } from '@/tests/_support/scenario'
import { parseCampaignForm } from './campaign-input'
import { createCampaign } from './create-campaign'

let scenario: Scenario
beforeEach(async () => {
  scenario = await makeScenario()
})
afterEach(() => scenario.db.destroy())

const { campaign: INPUT, rule: RULE } = parseCampaignForm({
  name: 'Märsche & Süd',
  survey: 'Saltmarsh Wide Survey',
  acronym: 'SWS',
  bands: 'g r i',
})

it('makes campaign, first rule, recipe and lead in one go', async () => {
  const { db, lead } = scenario
  const { id, slug } = await createCampaign(db, lead, INPUT, RULE)
  expect(slug).toBe('marsche-sud')
  const rules = await db.selectFrom('rule').select('version').where('campaign_id', '=', id).execute()
  expect(rules).toEqual([{ version: 1 }])
  const members = await db
    .selectFrom('membership')
    .select(['role', 'pseudonym'])
    .where('campaign_id', '=', id)
    .execute()
  expect(members).toEqual([{ role: 'lead', pseudonym: 'G01' }])
  expect(await db.selectFrom('recipe').select('id').where('campaign_id', '=', id).execute()).toHaveLength(1)
})

it('gives campaigns of one name addresses of their own', async () => {
  const first = await createCampaign(scenario.db, scenario.lead, INPUT, RULE)
  const second = await createCampaign(scenario.db, scenario.lead, INPUT, RULE)
  expect([first.slug, second.slug]).toEqual(['marsche-sud', 'marsche-sud-2'])
})

it('is refused to graders, viewers and signed-out visitors, and makes nothing', async () => {
  const { db, graders, reader } = scenario
  for (const person of [graders[0], reader]) {
    await expect(createCampaign(db, person, INPUT, RULE)).rejects.toMatchObject({ status: 403 })
  }
  await expect(createCampaign(db, null, INPUT, RULE)).rejects.toMatchObject({ status: 401 })
  expect(await db.selectFrom('campaign').select('id').execute()).toHaveLength(2)
})
