import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'
import type { Measurement } from '../schema/measuring'
import { among, inCampaign } from './by-ids'

export interface ReleasedMeasurementRow extends Measurement {
  pseudonym: string | null
}

/** What stood on these candidates, of each person too what does not count beside their own other; by candidate, oldest first. */
export async function listMeasurementsToRelease(
  db: Kysely<DB>,
  { campaignId, upTo }: { campaignId: number; upTo: number },
  candidateIds: readonly number[],
): Promise<ReleasedMeasurementRow[]> {
  if (candidateIds.length === 0) return []
  return db
    .selectFrom('measurement')
    .innerJoin('candidate', 'candidate.id', 'measurement.candidate_id')
    .leftJoin('membership', (join) =>
      join
        .onRef('membership.person_id', '=', 'measurement.person_id')
        .onRef('membership.campaign_id', '=', 'measurement.campaign_id'),
    )
    .selectAll('measurement')
    .select('membership.pseudonym')
    .where('measurement.candidate_id', 'in', among(candidateIds))
    .where(inCampaign('measurement.campaign_id', campaignId))
    .where('candidate.truth', 'is', null)
    .where('measurement.event', '=', 'measured')
    .where('measurement.id', '<=', upTo)
    .where(
      sql<boolean>`not exists
        (select 1 from measurement later where later.replaces = measurement.id and later.id <= ${upTo})`,
    )
    .orderBy('measurement.candidate_id')
    .orderBy('measurement.id')
    .execute()
}

/** Of these candidates, what each was merged into when that was the newest merge or parting: candidate to name. */
export async function listFrozenMerges(
  db: Kysely<DB>,
  { campaignId, upTo }: { campaignId: number; upTo: number },
  candidateIds: readonly number[],
): Promise<Map<number, string>> {
  if (candidateIds.length === 0) return new Map()
  const rows = await db
    .selectFrom('merge')
    .innerJoin('candidate as kept', 'kept.id', 'merge.kept_id')
    .select(['merge.merged_id as mergedId', 'kept.name'])
    .where('merge.merged_id', 'in', among(candidateIds))
    .where(inCampaign('merge.campaign_id', campaignId))
    .where('merge.event', '=', 'merged')
    .where('merge.id', '<=', upTo)
    .where(
      sql<boolean>`not exists
        (select 1 from merge later where later.merged_id = merge.merged_id and later.id > merge.id and later.id <= ${upTo})`,
    )
    .execute()
  return new Map(rows.map(({ mergedId, name }) => [mergedId, name]))
}
