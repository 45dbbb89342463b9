import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'

export interface LookSums {
  given: number
  wanted: number
}

/**
 * Standing looks at imaged candidates, none counted above `gradesWanted`, and looks wanted; a candidate that a ruling has
 * decided wants no more than it has.
 */
export async function sumLooks(
  db: Kysely<DB>,
  { campaignId, withCalibration }: { campaignId: number; withCalibration: boolean },
  gradesWanted: number,
): Promise<LookSums> {
  const given = sql<number>`min(candidate.grades_given, ${gradesWanted})`
  return db
    .selectFrom('candidate')
    .leftJoin('ruling', 'ruling.id', 'candidate.ruling_id')
    .select([
      sql<number>`coalesce(sum(${given}), 0)`.as('given'),
      sql<number>`coalesce(sum(case when ruling.outcome in ('confirmed', 'set aside') then ${given} else ${gradesWanted} end), 0)`.as(
        'wanted',
      ),
    ])
    .where('candidate.campaign_id', '=', campaignId)
    .$if(!withCalibration, (query) => query.where('candidate.truth', 'is', null))
    .where('candidate.imaged_at', 'is not', null)
    .executeTakeFirstOrThrow()
}

export async function countRefusedFiles(db: Kysely<DB>, campaignId: number): Promise<number> {
  const row = await db
    .selectFrom('file')
    .select((e) => e.fn.countAll<number>().as('n'))
    .where('campaign_id', '=', campaignId)
    .where('fate', '=', 'refused')
    .where('replaced_by', 'is', null)
    .executeTakeFirstOrThrow()
  return row.n
}

/** Confirmed most recently; never a calibration candidate. */
export async function listNewestConfirmed(
  db: Kysely<DB>,
  campaignId: number,
  limit: number,
): Promise<{ id: number; name: string }[]> {
  return db
    .selectFrom('candidate')
    .select(['id', 'name'])
    .where('campaign_id', '=', campaignId)
    .where('state', '=', 'confirmed')
    .where('truth', 'is', null)
    .orderBy('state_since', 'desc')
    .orderBy('id', 'desc')
    .limit(limit)
    .execute()
}
