import { sql, type Kysely } from 'kysely'

/** Which mail carries the link of an invitation, so that the link can be forgotten when it opens nothing any more. */
export async function up(db: Kysely<unknown>): Promise<void> {
  await sql.raw('alter table invitation add column mail_id integer').execute(db)
}

export async function down(db: Kysely<unknown>): Promise<void> {
  await sql.raw('alter table invitation drop column mail_id').execute(db)
}
