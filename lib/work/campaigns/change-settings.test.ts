import { afterEach, beforeEach, expect, it } from 'vitest'
import { makeScenario, type Scenario } from '@/tests/_support/scenario'
import { changeNamePattern, changeRule, listRuleVersions } from './change-settings'
import { ruleInForce } from './rule-in-force'
import { RuleInput } from './rule-input'

let scenario: Scenario
beforeEach(async () => {
  scenario = await makeScenario()
})
afterEach(() => scenario.db.destroy())
const lead = () => scenario.permit(scenario.lead, 'lead')
const jobs = () =>
  scenario.db.selectFrom('job').select(['payload', 'unique_key']).where('kind', '=', 'consensus').execute()

it('appends a version, leaves the earlier one as it was, and asks for one consensus run', async () => {
  const { db, campaign } = scenario
  expect(await changeRule(db, await lead(), RuleInput.parse({ confirmMean: '2.2' }))).toEqual({ version: 2 })
  await changeRule(db, await lead(), RuleInput.parse({ confirmMean: '2.4' }))
  const versions = await listRuleVersions(db, await lead())
  expect(versions).toMatchObject([
    { version: 3, confirmMean: 2.4 },
    { version: 2, confirmMean: 2.2 },
    { version: 1, confirmMean: 2 },
  ])
  expect(versions[0].author).toBe('avocet')
  expect(await ruleInForce(db, campaign.id)).toMatchObject({ method: 'mean', confirmMean: 2.4 })
  // The second change finds the first one's run still waiting.
  expect(await jobs()).toEqual([
    { payload: JSON.stringify({ campaignId: campaign.id }), unique_key: `consensus:${campaign.id}` },
  ])
})

it('changes the method and keeps the rule of the other in its history', async () => {
  const { db, campaign } = scenario
  const input = RuleInput.parse({ method: 'reliability', gradesWanted: '8', falseConfirmed: '0.01' })
  await changeRule(db, await lead(), input)
  expect(await ruleInForce(db, campaign.id)).toMatchObject({ version: 2, mostLooks: 8, ...input })
  const [, before] = await listRuleVersions(db, await lead())
  expect(before).toMatchObject({ version: 1, method: 'mean', confirmMean: 2 })
  expect(before).not.toHaveProperty('falseConfirmed')
  await expect(changeRule(db, await lead(), input)).rejects.toMatchObject({ type: 'rule-unchanged' })
})

it('refuses the rule that is in force already, and asks for no run', async () => {
  await expect(changeRule(scenario.db, await lead(), RuleInput.parse({}))).rejects.toMatchObject({
    type: 'rule-unchanged',
  })
  expect(await jobs()).toEqual([])
})

it('leaves no version lost when two leads change the rule at once', async () => {
  const permit = await lead()
  await Promise.all([
    changeRule(scenario.db, permit, RuleInput.parse({ confirmMean: '2.2' })),
    changeRule(scenario.db, permit, RuleInput.parse({ confirmMean: '2.4' })),
  ])
  expect(await listRuleVersions(scenario.db, permit)).toHaveLength(3)
})

it('changes the name pattern and notes both', async () => {
  await changeNamePattern(scenario.db, await lead(), '{band}-{candidate}')
  expect((await lead()).campaign.name_pattern).toBe('{band}-{candidate}')
  const event = await scenario.db
    .selectFrom('audit_event')
    .select('detail')
    .where('action', '=', 'campaigns.name-pattern-changed')
    .executeTakeFirstOrThrow()
  expect(JSON.parse(event.detail)).toEqual({ from: null, to: '{band}-{candidate}' })
})

it('gives nobody below a lead the permit that it takes', async () => {
  for (const person of [scenario.graders[0], scenario.reader]) {
    await expect(scenario.permit(person, 'lead')).rejects.toMatchObject({ status: 403 })
  }
  await expect(scenario.permit(scenario.stranger, 'lead')).rejects.toMatchObject({ status: 404 })
})
