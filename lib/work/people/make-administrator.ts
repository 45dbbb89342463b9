import 'server-only'
import type { Kysely } from 'kysely'
import { z } from 'zod'
import { findPersonByEmail, hasAdministrator, insertPerson } from '@/db/queries/people'
import type { DB } from '@/db/schema'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import { conflict } from '@/lib/platform/problems/problem'
import { hashPassword, Password } from './passwords'
import { EmailAddress, PersonName } from './person-input'
import { assertSetupCode, spendSetupCode } from './setup-code'

export const AdministratorInput = z.object({
  code: z.string().trim().min(1, 'Enter the code that the server printed at its start.').max(100),
  name: PersonName,
  email: EmailAddress,
  password: Password,
})
export type AdministratorInput = z.output<typeof AdministratorInput>

/** Whether the first visit is still to come. */
export async function isFirstVisit(db: Kysely<DB>): Promise<boolean> {
  return !(await hasAdministrator(db))
}

/** The site's first administrator, made by whoever holds the code that the server printed. Works once. */
export async function makeAdministrator(db: Kysely<DB>, input: AdministratorInput): Promise<{ email: string }> {
  await assertSetupCode(db, input.code)
  const passwordHash = await hashPassword(input.password)
  return db.transaction().execute(async (transaction) => {
    await spendSetupCode(transaction)
    if (await findPersonByEmail(transaction, input.email)) {
      throw conflict('account-exists', 'An account has this e-mail address already. Take another address.')
    }
    const { email, name } = input
    const id = await insertPerson(transaction, { email, name, passwordHash, isAdmin: true, now: isoTime() })
    await recordEvent(transaction, { personId: id, action: 'people.administrator-made', subject: String(id) })
    return { email }
  })
}
