import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'
import type { Candidate } from '../schema/intake'
import { among, inCampaign } from './by-ids'

export interface KnownTruth {
  id: number
  name: string
  truth: Candidate['truth']
  explanation: string | null
  /** Painted, or chosen among the campaign's own galaxies: made here, not told by a manifest. */
  made: 0 | 1
  grades: 0 | 1
  /** Looked at in the first pass or in practice, or asked for. */
  looks: 0 | 1
  /** A verdict, a ruling, a place in the catalogue, another candidate that was merged with it. */
  judged: 0 | 1
}

const some = (table: string) =>
  sql<0 | 1>`exists (select 1 from ${sql.table(table)} of where of.candidate_id = candidate.id)`

/** Of these names, the candidates that are here, with what is known of them and whether anybody has worked with them. */
export async function listKnownTruths(
  db: Kysely<DB>,
  campaignId: number,
  names: readonly string[],
): Promise<KnownTruth[]> {
  if (names.length === 0) return []
  return db
    .selectFrom('candidate')
    .select(['id', 'name', 'truth', 'explanation'])
    .select([
      sql<0 | 1>`painted_over is not null`.as('made'),
      some('grade').as('grades'),
      sql<0 | 1>`${some('sheet_mark')} or ${some('practice_answer')} or ${some('asked_look')}`.as('looks'),
      sql<0 | 1>`state <> 'open' or ${some('verdict')} or ${some('ruling')} or ${some('entry')}
        or exists (select 1 from merge where kept_id = candidate.id)
        or exists (select 1 from merge where merged_id = candidate.id)`.as('judged'),
    ])
    .where('campaign_id', '=', campaignId)
    .where('name', 'in', names)
    .execute()
}

/** Makes candidates of the campaign calibration stamps of this truth, or ordinary candidates again. */
export async function setTruths(
  db: Kysely<DB>,
  campaignId: number,
  candidateIds: readonly number[],
  told: { truth: Candidate['truth']; explanation: string | null },
): Promise<void> {
  await db
    .updateTable('candidate')
    .set(told)
    .where(inCampaign('campaign_id', campaignId))
    .where('id', 'in', among(candidateIds))
    .execute()
}
