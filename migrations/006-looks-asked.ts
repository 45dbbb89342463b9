import { sql, type Kysely } from 'kysely'

/** How many looks a lead has asked for by reopening a candidate; it counts where it is above what the rule wants. */
export async function up(db: Kysely<unknown>): Promise<void> {
  await sql.raw('alter table candidate add column looks_asked integer not null default 0').execute(db)
  await sql
    .raw(
      `create index candidate_asked on candidate (campaign_id, id)
        where looks_asked > grades_given and imaged_at is not null`,
    )
    .execute(db)
}

export async function down(db: Kysely<unknown>): Promise<void> {
  await sql.raw('drop index candidate_asked').execute(db)
  await sql.raw('alter table candidate drop column looks_asked').execute(db)
}
