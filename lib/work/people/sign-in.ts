import 'server-only'
import type { Kysely } from 'kysely'
import { findPersonByEmail } from '@/db/queries/people'
import type { DB } from '@/db/schema'
import type { Person } from '@/db/schema/people'
import { Problem } from '@/lib/platform/problems/problem'
import { passwordMatches } from './passwords'
import { SlowDown } from './slow-down'

/** On globalThis: the bundler may load this module more than once in a process. */
const shared = globalThis as typeof globalThis & { ringsideSignInSlowDown?: SlowDown }

/**
 * The account behind an address and a password, or null. Unknown address, wrong password and left account answer alike.
 * @throws Problem 429 after several wrong passwords in a row for one address, whether it has an account or not.
 */
export async function findPersonBySecret(
  db: Kysely<DB>,
  email: string,
  password: string,
  slowDown = (shared.ringsideSignInSlowDown ??= new SlowDown()),
): Promise<Person | null> {
  const key = email.trim().toLowerCase()
  if (slowDown.waitMs(key, Date.now()) > 0) {
    throw new Problem(429, 'slow-down', 'Too many wrong passwords for this address. Wait a minute, then try again.')
  }
  // Counted before the check, which takes time: tries sent side by side count too.
  slowDown.miss(key, Date.now())
  const person = await findPersonByEmail(db, email)
  const matches = await passwordMatches(password.slice(0, 1000), person?.password_hash ?? null)
  if (!person || !matches || person.left_at !== null) return null
  slowDown.hit(key)
  return person
}
