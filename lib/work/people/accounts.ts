import 'server-only'
import type { Kysely } from 'kysely'
import { z } from 'zod'
import {
  countAdministrators,
  findPerson,
  listAccounts as listAccountRows,
  setAdministrator as setAdministratorRow,
  setPassword,
  setPersonName,
  type Account,
} from '@/db/queries/people'
import type { DB } from '@/db/schema'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { conflict, invalid, notFound, signInNeeded } from '@/lib/platform/problems/problem'
import { hashPassword, Password, passwordMatches } from './passwords'
import type { SitePermit } from './permission'
import { PersonName } from './person-input'
import type { Viewer } from './viewer'

export type { Account }

export function listAccounts(db: Kysely<DB>, _permit: SitePermit): Promise<Account[]> {
  return listAccountRows(db)
}

/** Makes somebody an administrator, or takes it back. The last one stays. */
export async function setAdministrator(
  db: Kysely<DB>,
  permit: SitePermit,
  input: { personId: number; isAdmin: boolean },
): Promise<{ name: string }> {
  return db.transaction().execute(async (transaction) => {
    const person = await findPerson(transaction, input.personId)
    if (!person || person.left_at !== null) throw notFound('account')
    if ((person.is_admin === 1) === input.isAdmin) return { name: person.name }
    if (!input.isAdmin && (await countAdministrators(transaction)) < 2) {
      throw conflict('last-administrator', `${person.name} is the only administrator. Make somebody else one first.`)
    }
    await setAdministratorRow(transaction, person.id, input.isAdmin)
    await recordEvent(transaction, {
      personId: permit.viewer.id,
      action: input.isAdmin ? 'people.administrator-made' : 'people.administrator-ended',
      subject: String(person.id),
    })
    return { name: person.name }
  })
}

export const NameInput = z.object({ name: PersonName })

export async function changeOwnName(db: Kysely<DB>, viewer: Viewer | null, name: string): Promise<void> {
  if (!viewer) throw signInNeeded()
  await db.transaction().execute(async (transaction) => {
    await setPersonName(transaction, viewer.id, name)
    await recordEvent(transaction, { personId: viewer.id, action: 'people.name-changed', subject: String(viewer.id) })
  })
}

export const PasswordInput = z.object({
  currentPassword: z.string().min(1, 'Enter the password that you have now.').max(1000),
  newPassword: Password,
})
export type PasswordInput = z.output<typeof PasswordInput>

/** Ends every session of the account, this one included: sign in again with the new password. */
export async function changeOwnPassword(db: Kysely<DB>, viewer: Viewer | null, input: PasswordInput): Promise<void> {
  if (!viewer) throw signInNeeded()
  const person = await findPerson(db, viewer.id)
  if (!(await passwordMatches(input.currentPassword, person?.password_hash ?? null))) {
    const reason = 'This is not your present password. Nothing was changed.'
    throw invalid(reason, [{ name: 'currentPassword', reason }])
  }
  const passwordHash = await hashPassword(input.newPassword)
  await db.transaction().execute(async (transaction) => {
    await setPassword(transaction, viewer.id, passwordHash)
    await recordEvent(transaction, {
      personId: viewer.id,
      action: 'people.password-changed',
      subject: String(viewer.id),
    })
  })
}
