import type { Kysely } from 'kysely'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { openMemoryDatabase } from '@/db/connection'
import { getSiteValue } from '@/db/queries/people'
import type { DB } from '@/db/schema'
import { AdministratorInput, isFirstVisit, makeAdministrator } from './make-administrator'
import { makeSetupCode } from './setup-code'
import { findPersonBySecret } from './sign-in'

const PASSWORD = 'a marsh at low tide'
let db: Kysely<DB>
beforeEach(async () => {
  db = await openMemoryDatabase()
})
afterEach(async () => {
  vi.useRealTimers()
  await db.destroy()
})

const input = (code: string, email = 'avocet@saltmarsh.test') =>
  AdministratorInput.parse({ code, name: 'avocet', email, password: PASSWORD })

async function freshCode(): Promise<string> {
  const code = await makeSetupCode(db)
  if (!code) throw new Error('no code was made')
  return code
}

describe('the one-time code', () => {
  it('makes an administrator who can sign in, and is spent', async () => {
    const code = await freshCode()
    expect(await isFirstVisit(db)).toBe(true)
    await makeAdministrator(db, input(code))
    expect(await isFirstVisit(db)).toBe(false)
    expect(await findPersonBySecret(db, 'AVOCET@saltmarsh.test', PASSWORD)).toMatchObject({ is_admin: 1 })
    await expect(makeAdministrator(db, input(code, 'dunlin@saltmarsh.test'))).rejects.toMatchObject({
      type: 'administrator-exists',
    })
    expect(await getSiteValue(db, 'setup-code')).toBeNull()
  })

  it('is taken in small letters and without its hyphens', async () => {
    const code = await freshCode()
    await makeAdministrator(db, input(code.toLowerCase().replaceAll('-', ' ')))
    expect(await isFirstVisit(db)).toBe(false)
  })

  it('is kept as a hash only', async () => {
    const code = await freshCode()
    const rows = JSON.stringify(await db.selectFrom('site').selectAll().execute())
    expect(rows).not.toContain(code)
    expect(rows).not.toContain(code.replaceAll('-', ''))
  })

  it('is another one at every start, and the earlier one works no more', async () => {
    const first = await freshCode()
    const second = await freshCode()
    expect(second).not.toBe(first)
    await expect(makeAdministrator(db, input(first))).rejects.toMatchObject({ status: 422 })
    await makeAdministrator(db, input(second))
  })

  it('is not made once there is an administrator', async () => {
    await makeAdministrator(db, input(await freshCode()))
    expect(await makeSetupCode(db)).toBeNull()
  })

  it('leaves one administrator when two use it at the same moment', async () => {
    const code = await freshCode()
    const results = await Promise.allSettled([
      makeAdministrator(db, input(code, 'avocet@saltmarsh.test')),
      makeAdministrator(db, input(code, 'dunlin@saltmarsh.test')),
    ])
    expect(results.map((result) => result.status).sort()).toEqual(['fulfilled', 'rejected'])
    expect(await db.selectFrom('person').select('id').execute()).toHaveLength(1)
  })

  it('refuses a wrong code and makes nobody', async () => {
    await freshCode()
    await expect(makeAdministrator(db, input('AAAA-AAAA-AAAA'))).rejects.toMatchObject({
      status: 422,
      invalidParameters: [{ name: 'code' }],
    })
    expect(await db.selectFrom('person').select('id').execute()).toHaveLength(0)
  })

  it('slows down after wrong codes, even for the right one, until the wait is over', async () => {
    vi.useFakeTimers({ toFake: ['Date'], now: new Date('2026-01-01T00:00:00Z') })
    const code = await freshCode()
    for (let miss = 0; miss < 3; miss++) {
      await expect(makeAdministrator(db, input('AAAA-AAAA-AAAA'))).rejects.toMatchObject({ status: 422 })
    }
    await expect(makeAdministrator(db, input(code))).rejects.toMatchObject({ status: 429, type: 'slow-down' })
    vi.setSystemTime(new Date('2026-01-01T00:00:10Z'))
    await makeAdministrator(db, input(code))
    expect(await isFirstVisit(db)).toBe(false)
  })

  it('says so where the server has not made one', async () => {
    await expect(makeAdministrator(db, input('AAAA-AAAA-AAAA'))).rejects.toMatchObject({ type: 'no-setup-code' })
  })
})
