import { sql, type SqlBool } from 'kysely'

/** `ids` as one bound value, so that a list of any length stays one statement. */
export function among(ids: readonly number[]) {
  return sql<number>`(select value from json_each(${JSON.stringify(ids)}))`
}

/**
 * The campaign as a condition that takes no index, beside a list of ids. SQLite would take the campaign's own index, trusting it
 * to be narrow, and read the whole campaign: 987 ms against 8 ms for 500 of 100,000 candidates.
 */
export const inCampaign = (column: string, campaignId: number) => sql<SqlBool>`+${sql.ref(column)} = ${campaignId}`
