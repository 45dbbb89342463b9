import { sql, type Expression, type Kysely, type RawBuilder } from 'kysely'
import type { DB } from '../schema'

export interface LookSums {
  given: number
  wanted: number
  /** Candidates that want more looks than they have. */
  waiting: number
}

/**
 * Standing looks at imaged candidates, none counted above what is wanted, and looks wanted, by the rule or by a lead who
 * reopened; a candidate that a ruling has decided, or that is settled or was not sent on by the first pass, wants no more than
 * it has. For queries that join `candidate` and `ruling`, its standing one.
 */
export function lookSums(gradesWanted: number | Expression<number>): Record<keyof LookSums, RawBuilder<number>> {
  const most = sql<number>`max(${gradesWanted}, candidate.looks_asked)`
  const given = sql<number>`min(candidate.grades_given, ${most})`
  const wanted = sql<number>`case
    when ruling.outcome in ('confirmed', 'set aside') then ${given}
    when candidate.first_pass = 'dropped' and (
      select uses_sheet from campaign where campaign.id = candidate.campaign_id) = 1 then ${given}
    when candidate.settled = 1 then max(${given}, candidate.looks_asked)
    else ${most} end`
  const ofImaged = (looks: RawBuilder<number>) =>
    sql<number>`coalesce(sum(case when candidate.imaged_at is not null then ${looks} end), 0)`
  return { given: ofImaged(given), wanted: ofImaged(wanted), waiting: ofImaged(sql<number>`(${wanted} > ${given})`) }
}

export async function sumLooks(
  db: Kysely<DB>,
  { campaignId, withCalibration }: { campaignId: number; withCalibration: boolean },
  gradesWanted: number,
): Promise<LookSums> {
  const { given, wanted, waiting } = lookSums(gradesWanted)
  return db
    .selectFrom('candidate')
    .leftJoin('ruling', 'ruling.id', 'candidate.ruling_id')
    .select([given.as('given'), wanted.as('wanted'), waiting.as('waiting')])
    .where('candidate.campaign_id', '=', campaignId)
    .$if(!withCalibration, (query) => query.where('candidate.truth', 'is', null))
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
