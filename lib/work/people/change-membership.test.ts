import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { lendNext } from '@/lib/work/queue/lend-next'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { acceptAsNewPerson, readInvitation } from './accept-invitation'
import { changeRole, endMembership } from './change-membership'
import { InviteInput, invitePeople } from './invite-people'

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

describe('with the rights of a person end', () => {
  /** dunlin leads, has invited ruff, and holds a candidate; avocet has invited knot. */
  async function leaving() {
    const { db, campaign, graders, permit } = scenario
    const [, dunlin] = graders
    await addImagedCandidate(db, campaign, 'SWS-1')
    await changeRole(db, await lead(), { personId: dunlin.id, role: 'lead' })
    const invite = (emails: string) => InviteInput.parse({ emails, role: 'grader' })
    await invitePeople(db, await permit(dunlin, 'lead'), invite('ruff@saltmarsh.test'))
    await invitePeople(db, await lead(), invite('knot@saltmarsh.test'))
    await lendNext(db, await permit(dunlin, 'grade'), 1)
    const mails = await db.selectFrom('mail').select('body').orderBy('id').execute()
    const tokens = mails.map(({ body }) => /invitation\/([\w-]+)/.exec(body)?.[1] ?? '')
    return { dunlin, token: tokens[0], other: tokens[1] }
  }
  const leases = async () => (await scenario.db.selectFrom('lease').selectAll().execute()).length

  it('the invitations that they sent and their leases, and nobody else’s, when the membership ends', async () => {
    const { dunlin, token, other } = await leaving()
    await endMembership(scenario.db, await lead(), dunlin.id)
    expect(await readInvitation(scenario.db, token)).toEqual({ kind: 'withdrawn' })
    expect(await readInvitation(scenario.db, other)).toMatchObject({ kind: 'open' })
    expect(await leases()).toBe(0)
  })

  it('the invitations when a lead becomes a grader, who keeps what is on the bench', async () => {
    const { dunlin, token } = await leaving()
    await changeRole(scenario.db, await lead(), { personId: dunlin.id, role: 'grader' })
    const accept = acceptAsNewPerson(scenario.db, token, { name: 'ruff', password: 'waders feed at dusk' })
    await expect(accept).rejects.toMatchObject({ type: 'invitation-withdrawn' })
    expect(await leases()).toBe(1)
    await changeRole(scenario.db, await lead(), { personId: dunlin.id, role: 'viewer' })
    expect(await leases()).toBe(0)
  })

  it('nothing while a change is refused', async () => {
    const { token } = await leaving()
    const { db, graders, permit } = scenario
    await expect(permit(graders[0], 'lead')).rejects.toMatchObject({ status: 403 })
    await endMembership(db, await permit(graders[1], 'lead'), scenario.lead.id)
    const last = endMembership(db, await permit(graders[1], 'lead'), graders[1].id)
    await expect(last).rejects.toMatchObject({ type: 'last-lead' })
    expect(await readInvitation(db, token)).toMatchObject({ kind: 'open' })
    expect(await leases()).toBe(1)
  })
})
