import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { findPerson } from '@/db/queries/people'
import { makeScenario, type Scenario } from '@/tests/_support/scenario'
import { changeOwnName, changeOwnPassword, listAccounts, setAdministrator } from './accounts'
import { listOutbox } from './outbox'
import { hashPassword } from './passwords'
import { permitSite } from './permission'
import { findPersonBySecret } from './sign-in'

let scenario: Scenario
beforeEach(async () => {
  scenario = await makeScenario()
})
afterEach(() => scenario.db.destroy())

describe('administration', () => {
  it('is refused to everybody who is no administrator', () => {
    expect(() => permitSite(scenario.graders[0])).toThrow('Only an administrator')
    expect(() => permitSite(null)).toThrow('Sign in')
  })

  it('makes an administrator and takes it back, but never from the last', async () => {
    const { db, lead, stranger, graders } = scenario
    const permit = permitSite(lead)
    await setAdministrator(db, permit, { personId: graders[0].id, isAdmin: true })
    const accounts = await listAccounts(db, permit)
    expect(accounts.filter((account) => account.isAdmin).map(({ name }) => name)).toEqual([
      'avocet',
      'curlew',
      'oystercatcher',
    ])
    await setAdministrator(db, permit, { personId: graders[0].id, isAdmin: false })
    await setAdministrator(db, permit, { personId: stranger.id, isAdmin: false })
    await expect(setAdministrator(db, permit, { personId: lead.id, isAdmin: false })).rejects.toMatchObject({
      type: 'last-administrator',
    })
    await expect(setAdministrator(db, permit, { personId: 999, isAdmin: true })).rejects.toMatchObject({ status: 404 })
  })

  it('pages through the outbox, newest first', async () => {
    const { db, lead } = scenario
    for (let number = 1; number <= 60; number++) {
      await db
        .insertInto('mail')
        .values({
          recipient: 'knot@saltmarsh.test',
          subject: `${number}`,
          body: '',
          error: null,
          created_at: '2026-01-01T00:00:00.000Z',
          sent_at: null,
        })
        .execute()
    }
    const first = await listOutbox(db, permitSite(lead))
    expect(first.mails[0].subject).toBe('60')
    const second = await listOutbox(db, permitSite(lead), first.nextBefore ?? undefined)
    expect([...first.mails, ...second.mails]).toHaveLength(60)
    expect(second.nextBefore).toBeNull()
  })
})

describe('one’s own account', () => {
  it('takes a new password for the present one and ends every session', async () => {
    const { db, lead } = scenario
    await db
      .updateTable('person')
      .set({ password_hash: await hashPassword('the old password') })
      .where('id', '=', lead.id)
      .execute()
    const before = await findPerson(db, lead.id)
    const wrong = { currentPassword: 'a wrong password', newPassword: 'the new password' }
    await expect(changeOwnPassword(db, lead, wrong)).rejects.toMatchObject({
      status: 422,
      invalidParameters: [{ name: 'currentPassword' }],
    })
    await changeOwnPassword(db, lead, { ...wrong, currentPassword: 'the old password' })
    expect(await findPersonBySecret(db, lead.email, 'the old password')).toBeNull()
    const after = await findPersonBySecret(db, lead.email, 'the new password')
    expect(after?.session_epoch).toBe((before?.session_epoch ?? 0) + 1)
  })

  it('takes a new name, and nothing from a signed-out visitor', async () => {
    const { db, lead } = scenario
    await changeOwnName(db, lead, 'pied avocet')
    expect((await findPerson(db, lead.id))?.name).toBe('pied avocet')
    await expect(changeOwnName(db, null, 'nobody')).rejects.toMatchObject({ status: 401 })
    const input = { currentPassword: 'x', newPassword: 'the new password' }
    await expect(changeOwnPassword(db, null, input)).rejects.toMatchObject({ status: 401 })
  })
})
