import { sql, type Kysely, type SqlBool } from 'kysely'
import type { DB } from '../schema'
import type { QueuedCandidate } from './queue'

const SECRET = 'queue-secret'

/** The secret of this site that decides where calibration stamps fall; `made` where there is none yet. */
export async function queueSecret(db: Kysely<DB>, made: () => string): Promise<string> {
  const known = await db.selectFrom('site').select('value').where('key', '=', SECRET).executeTakeFirst()
  if (known) return known.value
  await db
    .insertInto('site')
    .values({ key: SECRET, value: made() })
    .onConflict((conflict) => conflict.doNothing())
    .execute()
  return (await db.selectFrom('site').select('value').where('key', '=', SECRET).executeTakeFirstOrThrow()).value
}

export interface MixOfCampaign {
  calibrationShare: number
  repeatShare: number
  /** Imaged calibration stamps of the campaign. */
  stamps: number
}

export async function findMix(db: Kysely<DB>, campaignId: number): Promise<MixOfCampaign> {
  return db
    .selectFrom('campaign')
    .select((e) => [
      'calibration_share as calibrationShare',
      'repeat_share as repeatShare',
      e
        .selectFrom('candidate')
        .select((c) => c.fn.countAll<number>().as('n'))
        .where('candidate.campaign_id', '=', campaignId)
        .where('candidate.truth', 'is not', null)
        .where('candidate.imaged_at', 'is not', null)
        .$asScalar()
        .$notNull()
        .as('stamps'),
    ])
    .where('id', '=', campaignId)
    .executeTakeFirstOrThrow()
}

/** Looks that this person has given, corrections and asked looks left out: the place in their queue. */
export async function countLooks(db: Kysely<DB>, campaignId: number, personId: number): Promise<number> {
  const row = await db
    .selectFrom('look_count')
    .select((e) => e.fn.sum<number | null>('n').as('n'))
    .where('campaign_id', '=', campaignId)
    .where('person_id', '=', personId)
    .where('occasion', 'in', ['first', 'repeat', 'late'])
    .executeTakeFirstOrThrow()
  return row.n ?? 0
}

/** Calibration stamps that this person has neither graded nor answered in practice, and does not hold. */
function unseenStamps(db: Kysely<DB>, { campaignId, personId }: { campaignId: number; personId: number }) {
  const none = (table: string) =>
    sql<SqlBool>`not exists (select 1 from ${sql.table(table)} seen
      where seen.candidate_id = candidate.id and seen.person_id = ${personId})`
  return db
    .selectFrom('candidate')
    .where('candidate.campaign_id', '=', campaignId)
    .where('candidate.truth', 'is not', null)
    .where('candidate.imaged_at', 'is not', null)
    .where(none('grade'))
    .where(none('practice_answer'))
    .where(none('lease'))
    .where(sentOnByPasser(campaignId, personId))
}

/** To the bench of somebody who makes the first pass comes nothing that they have not sent on themselves. */
const sentOnByPasser = (campaignId: number, personId: number) => sql<SqlBool>`(
  not exists (select 1 from campaign where campaign.id = ${campaignId} and campaign.uses_sheet = 1)
  or not exists (select 1 from sheet_mark own where own.campaign_id = ${campaignId} and own.person_id = ${personId})
  or coalesce((select mark from sheet_mark own where own.candidate_id = candidate.id and own.person_id = ${personId}
    order by own.id desc limit 1), '') = 'sent on')`

export interface UnseenStamp extends QueuedCandidate {
  /** Painted over a galaxy that this person has graded. */
  galaxySeen: 0 | 1
}

export async function listUnseenStamps(
  db: Kysely<DB>,
  who: { campaignId: number; personId: number },
): Promise<UnseenStamp[]> {
  return unseenStamps(db, who)
    .select(['candidate.id', 'candidate.name', 'candidate.ra_deg as raDeg', 'candidate.dec_deg as decDeg'])
    .select(
      sql<0 | 1>`exists (select 1 from grade seen
        where seen.candidate_id = candidate.painted_over and seen.person_id = ${who.personId})`.as('galaxySeen'),
    )
    .orderBy('candidate.id')
    .execute()
}

export async function countUnseenStamps(
  db: Kysely<DB>,
  who: { campaignId: number; personId: number },
): Promise<number> {
  const row = await unseenStamps(db, who)
    .select((e) => e.fn.countAll<number>().as('n'))
    .executeTakeFirstOrThrow()
  return row.n
}

export async function hasPractised(
  db: Kysely<DB>,
  { campaignId, personId }: { campaignId: number; personId: number },
): Promise<boolean> {
  const row = await db
    .selectFrom('membership')
    .select('practises')
    .where('campaign_id', '=', campaignId)
    .where('person_id', '=', personId)
    .executeTakeFirst()
  return row?.practises === 1
}

/** Calibration stamps that this person holds. */
export async function countHeldStamps(
  db: Kysely<DB>,
  { campaignId, personId, now }: { campaignId: number; personId: number; now: string },
): Promise<number> {
  const row = await db
    .selectFrom('lease')
    .innerJoin('candidate', 'candidate.id', 'lease.candidate_id')
    .select((e) => e.fn.countAll<number>().as('n'))
    .where('lease.campaign_id', '=', campaignId)
    .where('lease.person_id', '=', personId)
    .where('lease.until', '>', now)
    .where('candidate.truth', 'is not', null)
    .executeTakeFirstOrThrow()
  return row.n
}
