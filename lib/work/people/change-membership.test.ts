import { afterEach, beforeEach, expect, it } from 'vitest'
import { makeScenario, type Scenario } from '@/tests/_support/scenario'
import { changeRole, endMembership } from './change-membership'

let scenario: Scenario
beforeEach(async () => {
  scenario = await makeScenario()
})
afterEach(() => scenario.db.destroy())
const lead = () => scenario.permit(scenario.lead, 'lead')

it('changes a role, which holds from the next request on, and notes it', async () => {
  const [curlew] = scenario.graders
  await changeRole(scenario.db, await lead(), { personId: curlew.id, role: 'viewer' })
  await expect(scenario.permit(curlew, 'grade')).rejects.toMatchObject({ status: 403 })
  const event = await scenario.db
    .selectFrom('audit_event')
    .select('detail')
    .where('action', '=', 'people.role-changed')
    .executeTakeFirstOrThrow()
  expect(JSON.parse(event.detail)).toEqual({ from: 'grader', to: 'viewer' })
})

it('never takes the role from the last lead, nor ends the membership', async () => {
  const { db, lead: avocet } = scenario
  await expect(changeRole(db, await lead(), { personId: avocet.id, role: 'grader' })).rejects.toMatchObject({
    type: 'last-lead',
  })
  await expect(endMembership(db, await lead(), avocet.id)).rejects.toMatchObject({ type: 'last-lead' })
  expect((await lead()).role).toBe('lead')
})

it('lets one of two leads go, and then holds the other', async () => {
  const { db, lead: avocet, graders } = scenario
  await changeRole(db, await lead(), { personId: graders[0].id, role: 'lead' })
  const permit = await lead()
  const results = await Promise.allSettled([
    endMembership(db, permit, avocet.id),
    endMembership(db, permit, graders[0].id),
  ])
  expect(results.map((result) => result.status)).toEqual(['fulfilled', 'rejected'])
})

it('reaches nobody outside the campaign, and nobody whose membership has ended', async () => {
  const { db, stranger, graders } = scenario
  await expect(endMembership(db, await lead(), stranger.id)).rejects.toMatchObject({ status: 404 })
  await endMembership(db, await lead(), graders[0].id)
  await expect(changeRole(db, await lead(), { personId: graders[0].id, role: 'lead' })).rejects.toMatchObject({
    status: 404,
  })
})
