import { sql, type Kysely } from 'kysely'

/** Which grader has been shown the judgement of which candidate, and when first: their own grade of it stands from then on. */
const STATEMENTS = [
  `create table judgement_shown (
    campaign_id integer not null references campaign (id),
    candidate_id integer not null references candidate (id),
    person_id integer not null references person (id),
    at text not null,
    primary key (person_id, candidate_id)
  ) strict, without rowid`,
  ...(['update', 'delete'] as const).map(
    (verb) => `create trigger judgement_shown_no_${verb} before ${verb} on judgement_shown
      begin select raise(abort, 'judgement_shown rows are never changed: append a new one'); end`,
  ),
]

export async function up(db: Kysely<unknown>): Promise<void> {
  for (const statement of STATEMENTS) await sql.raw(statement).execute(db)
}

export async function down(db: Kysely<unknown>): Promise<void> {
  await sql.raw('drop table judgement_shown').execute(db)
}
