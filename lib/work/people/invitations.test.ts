import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { makeScenario, type Scenario } from '@/tests/_support/scenario'
import { openMailTrap } from '@/tests/_support/mail-trap'
import { deliverMail } from '@/lib/platform/mail/deliver-mail'
import { acceptAsNewPerson, acceptAsViewer, NewPersonInput, readInvitation } from './accept-invitation'
import { endMembership } from './change-membership'
import { InviteInput, invitePeople, sendInvitationAgain, withdrawInvitation } from './invite-people'
import { listPeople } from './list-people'
import { listOutbox, retryMail } from './outbox'
import { permitSite } from './permission'
import { findPersonBySecret } from './sign-in'

const PASSWORD = 'waders feed at dusk'
let scenario: Scenario
beforeEach(async () => {
  scenario = await makeScenario()
})
afterEach(async () => {
  vi.useRealTimers()
  await scenario.db.destroy()
})

const lead = () => scenario.permit(scenario.lead, 'lead')
const newPerson = (name = 'knot') => NewPersonInput.parse({ name, password: PASSWORD })
const tokenIn = (text: string) => /\/invitation\/([\w-]+)/.exec(text)?.[1] ?? ''

async function newestToken(): Promise<string> {
  const mail = await scenario.db.selectFrom('mail').select('body').orderBy('id', 'desc').executeTakeFirstOrThrow()
  return tokenIn(mail.body)
}

async function invite(emails: string, role = 'grader'): Promise<string> {
  await invitePeople(scenario.db, await lead(), InviteInput.parse({ emails, role }))
  return newestToken()
}

describe('inviting', () => {
  it('writes invitation, mail, job and event together, and of the link only the hash outside the mail', async () => {
    const token = await invite('knot@saltmarsh.test')
    const { db } = scenario
    const invitations = await db.selectFrom('invitation').selectAll().execute()
    expect(invitations).toHaveLength(1)
    expect(JSON.stringify(invitations)).not.toContain(token)
    expect(await db.selectFrom('job').select('kind').where('kind', '=', 'send-mail').execute()).toHaveLength(1)
    const events = await db.selectFrom('audit_event').selectAll().where('action', '=', 'people.invited').execute()
    expect(events).toHaveLength(1)
    expect(JSON.stringify(events)).not.toContain(token)
  })

  it('brings a link by real mail that opens the invitation', async () => {
    await invite('knot@saltmarsh.test')
    const trap = await openMailTrap()
    const { id } = await scenario.db.selectFrom('mail').select('id').executeTakeFirstOrThrow()
    await deliverMail(scenario.db, id, { smtpUrl: trap.url, mailFrom: 'ringside@saltmarsh.test' })
    await trap.close()
    const token = tokenIn(trap.mails[0].text ?? '')
    expect(await readInvitation(scenario.db, token)).toMatchObject({ kind: 'open', email: 'knot@saltmarsh.test' })
  })

  it('takes several addresses, each once, and passes over members', async () => {
    const input = InviteInput.parse({
      emails: 'knot@saltmarsh.test, ruff@saltmarsh.test\nKNOT@saltmarsh.test; CURLEW@saltmarsh.test',
      role: 'viewer',
    })
    const { invited, members } = await invitePeople(scenario.db, await lead(), input)
    expect(invited.map((email) => email.toLowerCase())).toEqual(['knot@saltmarsh.test', 'ruff@saltmarsh.test'])
    expect(members).toEqual(['CURLEW@saltmarsh.test'])
  })

  it('names the address that is none, and invites nobody', () => {
    const parsed = InviteInput.safeParse({ emails: 'knot@saltmarsh.test nonsense', role: 'grader' })
    expect(parsed.error?.issues[0].message).toContain('nonsense')
  })

  it('refuses when everybody is a member already', async () => {
    await expect(invite('curlew@saltmarsh.test')).rejects.toMatchObject({ type: 'already-members' })
  })

  it('is refused to graders, viewers and outsiders', async () => {
    for (const person of [scenario.graders[0], scenario.reader]) {
      await expect(scenario.permit(person, 'lead')).rejects.toMatchObject({ status: 403 })
    }
    await expect(scenario.permit(scenario.stranger, 'lead')).rejects.toMatchObject({ status: 404 })
  })
})

describe('accepting with a new account', () => {
  it('makes account and membership with the next pseudonym, and the password signs in', async () => {
    const token = await invite('knot@saltmarsh.test')
    const { slug, email } = await acceptAsNewPerson(scenario.db, token, newPerson())
    expect(slug).toBe(scenario.campaign.slug)
    expect(await findPersonBySecret(scenario.db, email, PASSWORD)).toMatchObject({ name: 'knot', is_admin: 0 })
    const { members, invitations } = await listPeople(scenario.db, await lead())
    // The scenario's reader is G90, so the next one is above it.
    expect(members.find((member) => member.name === 'knot')).toMatchObject({ role: 'grader', pseudonym: 'G91' })
    expect(invitations).toEqual([])
  })

  it('works once: the same link again is refused and changes nothing', async () => {
    const token = await invite('knot@saltmarsh.test')
    await acceptAsNewPerson(scenario.db, token, newPerson())
    await expect(acceptAsNewPerson(scenario.db, token, newPerson('ruff'))).rejects.toMatchObject({
      type: 'invitation-used',
    })
    expect(await readInvitation(scenario.db, token)).toEqual({ kind: 'used' })
    expect(await findPersonBySecret(scenario.db, 'knot@saltmarsh.test', PASSWORD)).toMatchObject({ name: 'knot' })
  })

  it('makes one person when the link is used twice at the same moment', async () => {
    const token = await invite('knot@saltmarsh.test')
    const results = await Promise.allSettled([
      acceptAsNewPerson(scenario.db, token, newPerson()),
      acceptAsNewPerson(scenario.db, token, newPerson()),
    ])
    expect(results.map((result) => result.status).sort()).toEqual(['fulfilled', 'rejected'])
  })

  it('refuses an unknown, a cut and an empty token', async () => {
    const token = await invite('knot@saltmarsh.test')
    for (const wrong of ['nonsense', token.slice(0, -1), '']) {
      expect(await readInvitation(scenario.db, wrong)).toEqual({ kind: 'unknown' })
      await expect(acceptAsNewPerson(scenario.db, wrong, newPerson())).rejects.toMatchObject({ status: 404 })
    }
  })

  it('refuses the hash that the database holds in place of the token', async () => {
    await invite('knot@saltmarsh.test')
    const row = await scenario.db.selectFrom('invitation').select('token_hash').executeTakeFirstOrThrow()
    expect(await readInvitation(scenario.db, row.token_hash)).toEqual({ kind: 'unknown' })
  })

  it('refuses after 14 days, and a second before still accepts', async () => {
    vi.useFakeTimers({ toFake: ['Date'], now: new Date('2026-01-01T00:00:00Z') })
    const token = await invite('knot@saltmarsh.test')
    vi.setSystemTime(new Date('2026-01-15T00:00:00Z'))
    expect(await readInvitation(scenario.db, token)).toEqual({ kind: 'expired' })
    await expect(acceptAsNewPerson(scenario.db, token, newPerson())).rejects.toMatchObject({
      type: 'invitation-expired',
    })
    vi.setSystemTime(new Date('2026-01-14T23:59:59Z'))
    await acceptAsNewPerson(scenario.db, token, newPerson())
  })

  it('does not set the password of an account that exists', async () => {
    const first = await invite('knot@saltmarsh.test')
    await acceptAsNewPerson(scenario.db, first, newPerson())
    const permit = await lead()
    const { id } = await scenario.db
      .selectFrom('person')
      .select('id')
      .where('email', '=', 'knot@saltmarsh.test')
      .executeTakeFirstOrThrow()
    await endMembership(scenario.db, permit, id)
    const second = await invite('knot@saltmarsh.test')
    const other = NewPersonInput.parse({ name: 'knot', password: 'another password' })
    await expect(acceptAsNewPerson(scenario.db, second, other)).rejects.toMatchObject({ type: 'account-exists' })
    expect(await findPersonBySecret(scenario.db, 'knot@saltmarsh.test', 'another password')).toBeNull()
  })
})

describe('accepting with an account', () => {
  it('lets the person with the address in, whatever its case', async () => {
    const { stranger, db } = scenario
    const token = await invite('OysterCatcher@saltmarsh.test', 'viewer')
    expect(await acceptAsViewer(db, stranger, token)).toEqual({ slug: scenario.campaign.slug })
    expect((await scenario.permit(stranger, 'read')).role).toBe('viewer')
  })

  it('refuses anybody else who holds the link, and the link still works for its person', async () => {
    const token = await invite('oystercatcher@saltmarsh.test')
    await expect(acceptAsViewer(scenario.db, scenario.graders[0], token)).rejects.toMatchObject({ status: 403 })
    await expect(acceptAsViewer(scenario.db, null, token)).rejects.toMatchObject({ status: 401 })
    await acceptAsViewer(scenario.db, scenario.stranger, token)
  })

  it('gives somebody who comes back the old pseudonym, and nobody else ever gets it', async () => {
    const { db, graders } = scenario
    const [curlew] = graders
    await endMembership(db, await lead(), curlew.id)
    await expect(scenario.permit(curlew, 'read')).rejects.toMatchObject({ status: 404 })
    await acceptAsNewPerson(db, await invite('knot@saltmarsh.test'), newPerson())
    await acceptAsViewer(db, curlew, await invite('curlew@saltmarsh.test'))
    const { members } = await listPeople(db, await lead())
    expect(members.find(({ name }) => name === 'curlew')?.pseudonym).toBe('G02')
    expect(new Set(members.map(({ pseudonym }) => pseudonym)).size).toBe(members.length)
  })
})

describe('open invitations', () => {
  const onlyInvitation = async () => (await listPeople(scenario.db, await lead())).invitations[0]

  it('are sent again with a fresh link, and the earlier link stops working', async () => {
    const first = await invite('knot@saltmarsh.test')
    await sendInvitationAgain(scenario.db, await lead(), (await onlyInvitation()).id)
    const second = await newestToken()
    expect(await readInvitation(scenario.db, first)).toEqual({ kind: 'withdrawn' })
    expect(await readInvitation(scenario.db, second)).toMatchObject({ kind: 'open', role: 'grader' })
    expect((await listPeople(scenario.db, await lead())).invitations).toHaveLength(1)
  })

  it('are withdrawn once', async () => {
    const token = await invite('knot@saltmarsh.test')
    const { id } = await onlyInvitation()
    await withdrawInvitation(scenario.db, await lead(), id)
    await expect(acceptAsNewPerson(scenario.db, token, newPerson())).rejects.toMatchObject({
      type: 'invitation-withdrawn',
    })
    await expect(withdrawInvitation(scenario.db, await lead(), id)).rejects.toMatchObject({ status: 409 })
    await expect(sendInvitationAgain(scenario.db, await lead(), id)).rejects.toMatchObject({ status: 409 })
  })

  it('of another campaign are out of a lead’s reach', async () => {
    const token = await invite('knot@saltmarsh.test')
    const { id } = await onlyInvitation()
    const { permitCampaign } = await import('./permission')
    const other = await permitCampaign(scenario.db, scenario.stranger, scenario.otherCampaign.slug, 'lead')
    await expect(withdrawInvitation(scenario.db, other, id)).rejects.toMatchObject({ status: 404 })
    await expect(sendInvitationAgain(scenario.db, other, id)).rejects.toMatchObject({ status: 404 })
    expect(await readInvitation(scenario.db, token)).toMatchObject({ kind: 'open' })
  })
})

it('lets one of two win that accept one link at the same moment, and makes one account', async () => {
  const token = await invite('knot@saltmarsh.test')
  const results = await Promise.allSettled([
    acceptAsNewPerson(scenario.db, token, newPerson('knot')),
    acceptAsNewPerson(scenario.db, token, newPerson('other')),
  ])
  expect(results.map(({ status }) => status).toSorted()).toEqual(['fulfilled', 'rejected'])
  const lost = results.find((result) => result.status === 'rejected')
  expect(lost?.reason).toMatchObject({ type: 'invitation-used' })
  const joined = await scenario.db
    .selectFrom('audit_event')
    .select('id')
    .where('action', '=', 'people.joined')
    .execute()
  expect(joined).toHaveLength(1)
})

it('tries a waiting mail again, once however often it is asked, and refuses one that has settled or is not there', async () => {
  const { db } = scenario
  const site = permitSite(scenario.lead)
  await invite('knot@saltmarsh.test')
  const { id } = await db.selectFrom('mail').select('id').executeTakeFirstOrThrow()
  await db.deleteFrom('job').execute()
  await retryMail(db, site, id)
  await retryMail(db, site, id)
  const jobs = await db.selectFrom('job').select(['kind', 'payload', 'state']).execute()
  expect(jobs).toEqual([{ kind: 'send-mail', payload: JSON.stringify({ mailId: id }), state: 'queued' }])
  await db.deleteFrom('job').execute()
  await deliverMail(db, id, { smtpUrl: undefined, mailFrom: 'ringside@saltmarsh.test' })
  await expect(retryMail(db, site, id)).rejects.toMatchObject({ status: 409, type: 'mail-settled' })
  await expect(retryMail(db, site, 999)).rejects.toMatchObject({ status: 404 })
  expect(() => permitSite(scenario.graders[0])).toThrow(expect.objectContaining({ status: 403 }))
  expect(await db.selectFrom('job').selectAll().execute()).toEqual([])
})

describe('the link in a mail that stays on this site', () => {
  const bodies = async () =>
    (await scenario.db.selectFrom('mail').select('body').orderBy('id').execute()).map(({ body }) => body)
  async function kept() {
    const token = await invite('knot@saltmarsh.test')
    const { id } = await scenario.db.selectFrom('mail').select('id').orderBy('id', 'desc').executeTakeFirstOrThrow()
    await deliverMail(scenario.db, id, { smtpUrl: undefined, mailFrom: 'ringside@saltmarsh.test' })
    expect((await bodies())[0]).toContain(token)
    const { id: invitationId } = await scenario.db.selectFrom('invitation').select('id').executeTakeFirstOrThrow()
    return { token, invitationId }
  }

  it('is forgotten when the invitation is used', async () => {
    const { token } = await kept()
    await acceptAsNewPerson(scenario.db, token, newPerson())
    expect(await bodies()).toEqual([expect.stringContaining('/invitation/…')])
    expect((await bodies())[0]).not.toContain(token)
  })

  it('is forgotten when the invitation is withdrawn or replaced, while the new link stays', async () => {
    const { token, invitationId } = await kept()
    await sendInvitationAgain(scenario.db, await lead(), invitationId)
    const fresh = await newestToken()
    expect((await bodies())[0]).not.toContain(token)
    expect((await bodies())[1]).toContain(fresh)
    const open = await scenario.db.selectFrom('invitation').select('id').orderBy('id', 'desc').executeTakeFirstOrThrow()
    await withdrawInvitation(scenario.db, await lead(), open.id)
    expect((await bodies())[1]).not.toContain(fresh)
  })

  it('is forgotten when the outbox is read after the invitation expired, and not before', async () => {
    const { token } = await kept()
    const site = permitSite(scenario.lead)
    expect((await listOutbox(scenario.db, site)).mails[0].body).toContain(token)
    vi.useFakeTimers({ toFake: ['Date'], now: Date.now() + 15 * 24 * 3600 * 1000 })
    expect((await listOutbox(scenario.db, site)).mails[0].body).not.toContain(token)
  })
})
