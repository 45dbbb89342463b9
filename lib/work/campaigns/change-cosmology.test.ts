import { afterEach, beforeEach, expect, it } from 'vitest'
import { PLANCK_2018 } from '@/lib/science/lensing/cosmology'
import { makeScenario, type Scenario } from '@/tests/_support/scenario'
import { changeCosmology } from './change-cosmology'
import { CosmologyInput } from './cosmology-input'
import { cosmologyInWords, cosmologyOf } from './cosmology-of'

let scenario: Scenario
beforeEach(async () => {
  scenario = await makeScenario()
})
afterEach(() => scenario.db.destroy())

const change = async (form: Record<string, string>) => {
  await changeCosmology(scenario.db, await scenario.permit(scenario.lead, 'lead'), CosmologyInput.parse(form))
  return (await scenario.permit(scenario.lead, 'read')).campaign
}

it('begins as the round numbers that most papers use, and can be Planck’s or the lead’s own, with a note of both', async () => {
  expect(cosmologyOf(scenario.campaign)).toMatchObject({ hubble: 70, omegaMatter: 0.3, temperatureK: 0 })
  const own = await change({ cosmology: 'flat LCDM', hubbleConstant: '72.5', omegaMatter: '0.27' })
  expect(cosmologyInWords(cosmologyOf(own))).toBe('flat ΛCDM, H₀ = 72.5 km/s/Mpc, Ωm = 0.27')
  const planck = await change({ cosmology: 'Planck 2018' })
  expect(cosmologyOf(planck)).toBe(PLANCK_2018)
  expect(planck).toMatchObject({ hubble_constant: 72.5, omega_matter: 0.27 })
  const events = await scenario.db
    .selectFrom('audit_event')
    .select('detail')
    .where('action', '=', 'campaigns.cosmology-changed')
    .execute()
  expect(events.map(({ detail }) => JSON.parse(detail))).toMatchObject([
    { from: { hubble_constant: 70 }, to: { hubble_constant: 72.5 } },
    { from: { cosmology: 'flat LCDM' }, to: { cosmology: 'Planck 2018' } },
  ])
})

it.each([
  [
    { cosmology: 'flat LCDM', hubbleConstant: '7', omegaMatter: '0.3' },
    'The Hubble constant lies from 20 to 150 km/s/Mpc.',
  ],
  [{ cosmology: 'flat LCDM', hubbleConstant: '70', omegaMatter: '1.3' }, 'The density of matter lies from 0.01 to 1.'],
  [{ cosmology: 'flat LCDM', hubbleConstant: 'x', omegaMatter: '0.3' }, 'The Hubble constant is a number of km/s/Mpc.'],
  [{ cosmology: 'steady state' }, 'The cosmology is one of: flat LCDM, Planck 2018.'],
])('refuses what cannot be: case %#', (form, sentence) => {
  expect(CosmologyInput.safeParse(form).error?.issues.map(({ message }) => message)).toEqual([sentence])
})

it('is for leads: a grader and a viewer get no permit for it', async () => {
  for (const person of [scenario.graders[0], scenario.reader]) {
    await expect(scenario.permit(person, 'lead')).rejects.toMatchObject({ status: 403 })
  }
})
