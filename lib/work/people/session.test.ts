import { afterEach, beforeEach, expect, it, vi } from 'vitest'
import { makeScenario, type Scenario } from '@/tests/_support/scenario'
import { changeOwnPassword } from './accounts'
import { hashPassword } from './passwords'
import { getViewer } from './session'

const around = vi.hoisted(() => ({ session: null as unknown, db: null as unknown }))
vi.mock('next-auth', () => ({ getServerSession: async () => around.session }))
vi.mock('./auth-options', () => ({ authOptions: () => ({}) }))
vi.mock('@/lib/platform/database', () => ({ database: async () => around.db }))
vi.mock('react', () => ({ cache: <T>(read: T) => read }))

let scenario: Scenario
beforeEach(async () => {
  scenario = await makeScenario()
  around.db = scenario.db
})
afterEach(() => scenario.db.destroy())

it('signs in the person of a session of the present epoch, and nobody without a session', async () => {
  around.session = { personId: scenario.lead.id, epoch: 1 }
  expect(await getViewer()).toEqual(scenario.lead)
  around.session = null
  expect(await getViewer()).toBeNull()
})

it('signs out every session that is older than the newest password', async () => {
  const [currentPassword, newPassword] = ['waders feed at dusk', 'waders rest at noon']
  const password_hash = await hashPassword(currentPassword)
  await scenario.db.updateTable('person').set({ password_hash }).where('id', '=', scenario.lead.id).execute()
  await changeOwnPassword(scenario.db, scenario.lead, { currentPassword, newPassword })
  around.session = { personId: scenario.lead.id, epoch: 1 }
  expect(await getViewer()).toBeNull()
  around.session = { personId: scenario.lead.id, epoch: 2 }
  expect(await getViewer()).toEqual(scenario.lead)
})

it('signs out who has left', async () => {
  around.session = { personId: scenario.lead.id, epoch: 1 }
  await scenario.db.updateTable('person').set({ left_at: '2026-01-02' }).where('id', '=', scenario.lead.id).execute()
  expect(await getViewer()).toBeNull()
})
