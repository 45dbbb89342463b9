import { expect, it } from 'vitest'
import { openMemoryDatabase } from '@/db/connection'
import { insertPerson } from '@/db/queries/people'
import { hashPassword } from './passwords'
import { findPersonBySecret } from './sign-in'
import { SlowDown } from './slow-down'

const EMAIL = 'curlew@saltmarsh.test'
const PASSWORD = 'a curlew calls at night'

async function withCurlew() {
  const db = await openMemoryDatabase()
  const passwordHash = await hashPassword(PASSWORD)
  const now = '2026-01-01T00:00:00.000Z'
  await insertPerson(db, { email: EMAIL, name: 'curlew', passwordHash, isAdmin: false, now })
  return db
}

it('finds the account by address in any case and exact password', async () => {
  const db = await withCurlew()
  expect(await findPersonBySecret(db, ` ${EMAIL.toUpperCase()} `, PASSWORD)).toMatchObject({ name: 'curlew' })
})

it('answers alike to a wrong password, an unknown address and an account that was left', async () => {
  const db = await withCurlew()
  expect(await findPersonBySecret(db, EMAIL, PASSWORD.toUpperCase())).toBeNull()
  expect(await findPersonBySecret(db, 'nobody@saltmarsh.test', PASSWORD)).toBeNull()
  await db.updateTable('person').set({ left_at: '2026-01-02T00:00:00.000Z' }).execute()
  expect(await findPersonBySecret(db, EMAIL, PASSWORD)).toBeNull()
})

it('makes a guesser wait after ten wrong passwords, also for an address without account', async () => {
  const db = await withCurlew()
  const slowDown = new SlowDown()
  for (const email of [EMAIL, 'nobody@saltmarsh.test']) {
    for (let miss = 0; miss < 10; miss++) slowDown.miss(email, Date.now())
    await expect(findPersonBySecret(db, email, PASSWORD, slowDown)).rejects.toMatchObject({ status: 429 })
  }
})

it('doubles the wait up to a minute and forgets after a quarter of an hour', () => {
  const slowDown = new SlowDown()
  for (let miss = 0; miss < 10; miss++) slowDown.miss('a', 0)
  expect(slowDown.waitMs('a', 0)).toBe(1000)
  slowDown.miss('a', 0)
  expect(slowDown.waitMs('a', 0)).toBe(2000)
  for (let miss = 0; miss < 50; miss++) slowDown.miss('a', 0)
  expect(slowDown.waitMs('a', 0)).toBe(60_000)
  slowDown.miss('a', 16 * 60_000)
  expect(slowDown.waitMs('a', 16 * 60_000)).toBe(0)
  expect(slowDown.waitMs('b', 0)).toBe(0)
})

it('starts anew after a right password', async () => {
  const db = await withCurlew()
  const slowDown = new SlowDown()
  for (let miss = 0; miss < 9; miss++) slowDown.miss(EMAIL, Date.now())
  expect(await findPersonBySecret(db, EMAIL, PASSWORD, slowDown)).not.toBeNull()
  for (let miss = 0; miss < 9; miss++) slowDown.miss(EMAIL, Date.now())
  expect(await findPersonBySecret(db, EMAIL, PASSWORD, slowDown)).not.toBeNull()
})
