import 'server-only'
import type { Kysely } from 'kysely'
import { findPersonByEmail } from '@/db/queries/people'
import type { DB } from '@/db/schema'
import type { Person } from '@/db/schema/people'
import { passwordMatches } from './passwords'

/** The account behind an address and a password, or null. Unknown address, wrong password and left account answer alike. */
export async function findPersonBySecret(db: Kysely<DB>, email: string, password: string): Promise<Person | null> {
  const person = await findPersonByEmail(db, email)
  const matches = await passwordMatches(password, person?.password_hash ?? null)
  return person && matches && person.left_at === null ? person : null
}
