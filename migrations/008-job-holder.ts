import { sql, type Kysely } from 'kysely'

async function isApplied(db: Kysely<unknown>): Promise<boolean> {
  const found = await sql.raw("select 1 from pragma_table_info('job') where name = 'holder'").execute(db)
  return found.rows.length > 0
}

/** Which process took a job last, by the name of its sign of life. */
export async function up(db: Kysely<unknown>): Promise<void> {
  if (await isApplied(db)) return
  await sql.raw('alter table job add column holder text').execute(db)
}

export async function down(db: Kysely<unknown>): Promise<void> {
  if (await isApplied(db)) await sql.raw('alter table job drop column holder').execute(db)
}
