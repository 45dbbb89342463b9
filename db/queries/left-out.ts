import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'
import type { LeftOut } from '../schema/consensus'
import type { CandidateState } from '../schema/intake'
import type { IsoTime } from '../schema/values'
import { among, inCampaign } from './by-ids'

/** The newest decision on the person in the campaign; null before the first, when their grades count. */
export async function findLeftOut(db: Kysely<DB>, campaignId: number, personId: number): Promise<LeftOut | null> {
  const row = await db
    .selectFrom('left_out')
    .selectAll()
    .where('campaign_id', '=', campaignId)
    .where('person_id', '=', personId)
    .orderBy('id', 'desc')
    .limit(1)
    .executeTakeFirst()
  return row ?? null
}

export interface LeftOutNow {
  personId: number
  reason: string
  decidedBy: string
  since: IsoTime
}

/** Everybody whose grades do not count now, in order of person. */
export async function listLeftOutNow(db: Kysely<DB>, campaignId: number): Promise<LeftOutNow[]> {
  return db
    .selectFrom('left_out')
    .innerJoin('person', 'person.id', 'left_out.decided_by')
    .select([
      'left_out.person_id as personId',
      'left_out.reason',
      'person.name as decidedBy',
      'left_out.created_at as since',
    ])
    .where('left_out.campaign_id', '=', campaignId)
    .where('left_out.left_out', '=', 1)
    .where(({ not, exists, selectFrom }) =>
      not(
        exists(
          selectFrom('left_out as newer')
            .select('newer.id')
            .whereRef('newer.campaign_id', '=', 'left_out.campaign_id')
            .whereRef('newer.person_id', '=', 'left_out.person_id')
            .whereRef('newer.id', '>', 'left_out.id'),
        ),
      ),
    )
    .orderBy('left_out.person_id')
    .execute()
}

export async function insertLeftOut(
  db: Kysely<DB>,
  row: {
    campaignId: number
    personId: number
    leftOut: boolean
    reason: string
    decidedBy: number
    now: IsoTime
  },
): Promise<number> {
  const { id } = await db
    .insertInto('left_out')
    .values({
      campaign_id: row.campaignId,
      person_id: row.personId,
      left_out: row.leftOut ? 1 : 0,
      reason: row.reason,
      decided_by: row.decidedBy,
      created_at: row.now,
    })
    .returning('id')
    .executeTakeFirstOrThrow()
  return id
}

/** The person's looks of the campaign, corrections not counted. */
export async function countLooksOf(db: Kysely<DB>, campaignId: number, personId: number): Promise<number> {
  const row = await db
    .selectFrom('grade')
    .select((e) => e.fn.countAll<number>().as('n'))
    .where('campaign_id', '=', campaignId)
    .where('person_id', '=', personId)
    .where('replaces', 'is', null)
    .executeTakeFirstOrThrow()
  return row.n
}

export interface LookNeed {
  id: number
  state: CandidateState
  settled: 0 | 1
  /** A ruling stands over verdicts, also one that reopened. */
  ruled: 0 | 1
  looksGiven: number
  looksAsked: number
  /** Standing first looks of people who are left out. */
  looksLost: number
  /** Places that people hold on their benches just now. */
  looksHeld: number
}

/** A page of the campaign's candidates by id, calibration stamps left out, as they stand at `now`. */
export async function listLookNeeds(
  db: Kysely<DB>,
  page: { campaignId: number; after: number; limit: number; now: IsoTime },
  leftOut: readonly number[],
): Promise<LookNeed[]> {
  return db
    .selectFrom('candidate')
    .leftJoin('ruling', 'ruling.id', 'candidate.ruling_id')
    .select([
      'candidate.id',
      'candidate.state',
      'candidate.settled',
      'candidate.grades_given as looksGiven',
      'candidate.looks_asked as looksAsked',
    ])
    .select(sql<0 | 1>`ruling.outcome is not null and ruling.outcome <> 'by verdict'`.as('ruled'))
    .select(
      sql<number>`(select count(*) from grade where grade.candidate_id = candidate.id and grade.occasion = 'first'
        and grade.replaces is null and grade.person_id in ${among(leftOut)})`.as('looksLost'),
    )
    .select(
      sql<number>`(select count(*) from lease where lease.candidate_id = candidate.id and lease.until > ${page.now})`.as(
        'looksHeld',
      ),
    )
    .where('candidate.id', '>', page.after)
    .where(inCampaign('candidate.campaign_id', page.campaignId))
    .where('candidate.truth', 'is', null)
    .orderBy('candidate.id')
    .limit(page.limit)
    .execute()
}

export async function setLooksAsked(
  db: Kysely<DB>,
  wants: readonly { id: number; looksAsked: number }[],
): Promise<void> {
  if (wants.length === 0) return
  await sql`
    update candidate set looks_asked = w.value ->> 1
    from json_each(${JSON.stringify(wants.map(({ id, looksAsked }) => [id, looksAsked]))}) w
    where candidate.id = w.value ->> 0`.execute(db)
}
