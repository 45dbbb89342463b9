import { afterEach, beforeEach, expect, it } from 'vitest'
import { makeScenario, type Scenario } from '@/tests/_support/scenario'
import { changeLooking } from './change-looking'
import { LookingInput } from './looking-input'

let scenario: Scenario
beforeEach(async () => {
  scenario = await makeScenario()
})
afterEach(() => scenario.db.destroy())

const FORM = { queueOrder: 'shuffled', calibrationPercent: '12.5', repeatPercent: '5', practiceWanted: '10' }

it('changes shares, practice and order for looks from now on, and notes both', async () => {
  await changeLooking(scenario.db, await scenario.permit(scenario.lead, 'lead'), LookingInput.parse(FORM))
  const { campaign } = await scenario.permit(scenario.lead, 'lead')
  expect(campaign).toMatchObject({
    queue_order: 'shuffled',
    calibration_share: 0.125,
    repeat_share: 0.05,
    practice_wanted: 10,
  })
  const { detail } = await scenario.db
    .selectFrom('audit_event')
    .select('detail')
    .where('action', '=', 'campaigns.looking-changed')
    .executeTakeFirstOrThrow()
  expect(JSON.parse(detail)).toMatchObject({ from: { calibration_share: 0.1 }, to: { calibration_share: 0.125 } })
})

it.each([
  ['calibrationPercent', '60', 'The share of calibration stamps is at most 50 %.'],
  ['repeatPercent', '21', 'The share of repeats is at most 20 %.'],
  ['practiceWanted', '2.5', 'Practice is a whole number of stamps.'],
  ['calibrationPercent', '', 'The share of calibration stamps is a number of per cent.'],
  ['repeatPercent', ' ', 'The share of repeats is a number of per cent.'],
  ['practiceWanted', '', 'Practice is a number of stamps; 0 asks for none.'],
  ['queueOrder', 'by name', 'The order is one of: most needed, score, shuffled.'],
])('refuses %s = %s with a sentence', (name, value, sentence) => {
  const messages = LookingInput.safeParse({ ...FORM, [name]: value }).error?.issues.map(({ message }) => message)
  expect(messages).toEqual([sentence])
})

it('is for leads: a grader and a viewer get no permit for it', async () => {
  for (const person of [scenario.graders[0], scenario.reader]) {
    await expect(scenario.permit(person, 'lead')).rejects.toMatchObject({ status: 403 })
  }
})
