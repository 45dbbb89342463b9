import { sql, type Kysely, type RawBuilder, type SqlBool } from 'kysely'
import type { DB } from '../schema'

/**
 * Whether a grader is told the name of a candidate, whose id stands in `column`: they have judged it, or a lead asks them by name for
 * a look at it.
 */
export function isNamedTo(
  { campaignId, personId }: { campaignId: number; personId: number },
  column: string,
): RawBuilder<SqlBool> {
  return sql<SqlBool>`${sql.ref(column)} in (
    select judged.candidate_id from judged where judged.campaign_id = ${campaignId} and judged.person_id = ${personId}
    union all select ask.candidate_id from asked_look ask
      where ask.campaign_id = ${campaignId} and ask.person_id = ${personId}
        and ask.grade_id is null and ask.withdrawn_at is null)`
}

/** Those of the candidates whose names the grader is told. */
export async function listNamedTo(
  db: Kysely<DB>,
  campaignId: number,
  personId: number,
  candidateIds: readonly number[],
): Promise<number[]> {
  const { rows } = await sql<{ id: number }>`
    select asked.value as id from json_each(${JSON.stringify(candidateIds)}) asked
    where exists (select 1 from judged where judged.campaign_id = ${campaignId} and judged.person_id = ${personId}
        and judged.candidate_id = asked.value)
      or exists (select 1 from asked_look ask where ask.candidate_id = asked.value and ask.person_id = ${personId}
        and ask.campaign_id = ${campaignId} and ask.grade_id is null and ask.withdrawn_at is null)`.execute(db)
  return rows.map(({ id }) => id)
}
