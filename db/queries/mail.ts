import type { Kysely } from 'kysely'
import type { DB } from '../schema'
import type { Mail } from '../schema/platform'

export async function insertMail(
  db: Kysely<DB>,
  mail: { recipient: string; subject: string; body: string; now: string },
): Promise<number> {
  const row = await db
    .insertInto('mail')
    .values({
      recipient: mail.recipient,
      subject: mail.subject,
      body: mail.body,
      error: null,
      created_at: mail.now,
      sent_at: null,
    })
    .returning('id')
    .executeTakeFirstOrThrow()
  return row.id
}

export async function findMail(db: Kysely<DB>, id: number): Promise<Mail | null> {
  return (await db.selectFrom('mail').selectAll().where('id', '=', id).executeTakeFirst()) ?? null
}

export async function setMailSent(db: Kysely<DB>, id: number, sent: { body: string; now: string }): Promise<void> {
  await db
    .updateTable('mail')
    .set({ state: 'sent', body: sent.body, sent_at: sent.now, error: null })
    .where('id', '=', id)
    .execute()
}

export async function setMailKept(db: Kysely<DB>, id: number): Promise<void> {
  await db.updateTable('mail').set({ state: 'kept', error: null }).where('id', '=', id).execute()
}

export async function setMailError(db: Kysely<DB>, id: number, error: string): Promise<void> {
  await db.updateTable('mail').set({ error }).where('id', '=', id).where('state', '=', 'waiting').execute()
}

/** Newest first; `before` is the last id of the page before. */
export async function listMails(db: Kysely<DB>, limit: number, before?: number): Promise<Mail[]> {
  let query = db.selectFrom('mail').selectAll().orderBy('id', 'desc').limit(limit)
  if (before !== undefined) query = query.where('id', '<', before)
  return query.execute()
}

export async function setMailBody(db: Kysely<DB>, id: number, body: string): Promise<void> {
  await db.updateTable('mail').set({ body }).where('id', '=', id).execute()
}
