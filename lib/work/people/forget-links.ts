import 'server-only'
import type { Kysely } from 'kysely'
import { listMailsOfDeadInvitations } from '@/db/queries/invitations'
import { setMailBody } from '@/db/queries/mail'
import type { DB } from '@/db/schema'
import { isoTime } from '@/lib/platform/clock'
import { withoutTokens } from '@/lib/platform/mail/deliver-mail'

/** Takes the secret out of mails that were kept here or never left, once the invitation is used, withdrawn or expired. */
export async function forgetDeadLinks(db: Kysely<DB>): Promise<void> {
  for (const { id, body } of await listMailsOfDeadInvitations(db, isoTime())) {
    const blank = withoutTokens(body)
    if (blank !== body) await setMailBody(db, id, blank)
  }
}
