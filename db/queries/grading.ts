import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'

/** `ids` as one bound value, so that a list of any length stays one statement. */
function among(ids: readonly number[]) {
  return sql<number>`(select value from json_each(${JSON.stringify(ids)}))`
}

/** Those of the candidates that belong to the campaign. */
export async function listCandidatesAmong(
  db: Kysely<DB>,
  campaignId: number,
  ids: readonly number[],
): Promise<number[]> {
  const rows = await db
    .selectFrom('candidate')
    .select('id')
    .where('campaign_id', '=', campaignId)
    .where('id', 'in', among(ids))
    .execute()
  return rows.map((row) => row.id)
}

/** Those of the candidates for which the person's standing answer, on any occasion, is a grade and not 'cannot judge'. */
export async function listJudgedAmong(
  db: Kysely<DB>,
  campaignId: number,
  personId: number,
  ids: readonly number[],
): Promise<number[]> {
  const rows = await db
    .selectFrom('grade')
    .select('candidate_id')
    .distinct()
    .where('campaign_id', '=', campaignId)
    .where('person_id', '=', personId)
    .where('candidate_id', 'in', among(ids))
    .where('grade', '!=', 'U')
    .where((e) =>
      e.not(e.exists(e.selectFrom('grade as newer').select('newer.id').whereRef('newer.replaces', '=', 'grade.id'))),
    )
    .execute()
  return rows.map((row) => row.candidate_id)
}
