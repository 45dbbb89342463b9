import { sql, type Insertable, type Kysely, type SqlBool } from 'kysely'
import type { DB } from '../schema'
import type { SheetMarkTable } from '../schema/grading'
import type { IsoTime } from '../schema/values'
import { among, inCampaign } from './by-ids'

export type FirstPass = 'waiting' | 'sent on' | 'dropped'

export interface Passer {
  campaignId: number
  personId: number
  now: IsoTime
}

/** Whether the person makes the first pass; leads do by their role. */
export async function isPasser(db: Kysely<DB>, campaignId: number, personId: number): Promise<boolean> {
  const row = await db
    .selectFrom('membership')
    .select('passes')
    .where('campaign_id', '=', campaignId)
    .where('person_id', '=', personId)
    .executeTakeFirst()
  return row?.passes === 1
}

export async function setUsesSheet(db: Kysely<DB>, campaignId: number, usesSheet: boolean): Promise<void> {
  await db
    .updateTable('campaign')
    .set({ uses_sheet: usesSheet ? 1 : 0 })
    .where('id', '=', campaignId)
    .execute()
}

/** Exactly these make the first pass. */
export async function setPassers(db: Kysely<DB>, campaignId: number, personIds: readonly number[]): Promise<void> {
  await db
    .updateTable('membership')
    .set({ passes: sql<0 | 1>`person_id in (select value from json_each(${JSON.stringify(personIds)}))` })
    .where('campaign_id', '=', campaignId)
    .execute()
}

export async function listPassers(db: Kysely<DB>, campaignId: number): Promise<number[]> {
  const rows = await db
    .selectFrom('membership')
    .select('person_id')
    .where('campaign_id', '=', campaignId)
    .where('passes', '=', 1)
    .where('ended_at', 'is', null)
    .execute()
  return rows.map(({ person_id }) => person_id)
}

export async function deleteExpiredSheetLeases(db: Kysely<DB>, { campaignId, now }: Passer): Promise<void> {
  await db.deleteFrom('sheet_lease').where('campaign_id', '=', campaignId).where('until', '<=', now).execute()
}

/** What lies on this person's sheet and has no mark yet: of a calibration stamp none of theirs. In the order in which it came. */
export async function listOnSheet(db: Kysely<DB>, passer: Passer): Promise<{ id: number; name: string }[]> {
  return db
    .selectFrom('sheet_lease')
    .innerJoin('candidate', 'candidate.id', 'sheet_lease.candidate_id')
    .select(['candidate.id', 'candidate.name'])
    .where('sheet_lease.campaign_id', '=', passer.campaignId)
    .where('sheet_lease.person_id', '=', passer.personId)
    .where(
      sql<SqlBool>`case when candidate.truth is null then candidate.first_pass = 'waiting' else ${unmarkedBy(passer)} end`,
    )
    .orderBy('sheet_lease.id')
    .execute()
}

const unmarkedBy = ({ personId }: Passer) => sql<SqlBool>`coalesce((
  select mark from sheet_mark where sheet_mark.candidate_id = candidate.id and sheet_mark.person_id = ${personId}
    order by id desc limit 1), 'taken back') = 'taken back'`

/** Along which index the first pass takes what waits: the highest score first, by the spread from a place on, or a few by id. */
export type PassOrder = 'score' | 'id' | { spreadFrom: number }

/** What waits for the first pass and lies on nobody's sheet. */
export async function listToPass(
  db: Kysely<DB>,
  passer: Passer,
  { order, limit }: { order: PassOrder; limit: number },
): Promise<{ id: number; name: string }[]> {
  const { campaignId } = passer
  const [index, where, sorted] =
    order === 'score'
      ? [
          sql`candidate_queue_score`,
          sql`campaign_id = ${campaignId} and grades_given = 0 and truth is null`,
          sql`ifnull(score, -1e308) desc, spread`,
        ]
      : order === 'id'
        ? [sql`candidate_first_pass`, sql`campaign_id = ${campaignId} and truth is null`, sql`id`]
        : [
            sql`candidate_queue_shuffled`,
            sql`campaign_id + 0 = ${campaignId} and spread >= ${order.spreadFrom} and truth is null`,
            sql`spread`,
          ]
  const { rows } = await sql<{ id: number; name: string }>`
    select id, name from candidate indexed by ${index}
    where ${where} and first_pass = 'waiting' and imaged_at is not null
      and not exists (select 1 from sheet_lease lease where lease.candidate_id = candidate.id)
      and not exists (select 1 from ruling where ruling.id = candidate.ruling_id
        and ruling.outcome in ('confirmed', 'set aside'))
    order by ${sorted} limit ${limit}`.execute(db)
  return rows
}

/** How many lie on this person's sheet without a mark, calibration stamps among them and without. */
export async function countOnSheet(db: Kysely<DB>, passer: Passer): Promise<{ all: number; candidates: number }> {
  const held = (await listOnSheet(db, passer)).map(({ id }) => id)
  const row = await db
    .selectFrom('candidate')
    .select((e) => e.fn.countAll<number>().as('n'))
    .where('id', 'in', among(held))
    .where(sql<SqlBool>`+truth is null`)
    .executeTakeFirstOrThrow()
  return { all: held.length, candidates: row.n }
}

/**
 * Calibration stamps that this person has not met: neither marked, nor on their sheet, nor graded or on their bench, where nothing
 * that comes to a sheet has been, nor told in practice.
 */
export async function listStampsToPass(db: Kysely<DB>, passer: Passer): Promise<{ id: number; name: string }[]> {
  return db
    .selectFrom('candidate')
    .select(['id', 'name'])
    .where('campaign_id', '=', passer.campaignId)
    .where('truth', 'is not', null)
    .where('imaged_at', 'is not', null)
    .where(unmarkedBy(passer))
    .where(
      sql<SqlBool>`not exists (select 1 from sheet_lease lease
        where lease.candidate_id = candidate.id and lease.person_id = ${passer.personId})`,
    )
    .where((e) =>
      e.and(
        ['grade', 'lease', 'practice_answer'].map(
          (table) => sql<SqlBool>`not exists (select 1 from ${sql.table(table)} met
            where met.candidate_id = candidate.id and met.person_id = ${passer.personId})`,
        ),
      ),
    )
    .orderBy('id')
    .execute()
}

export async function layOnSheet(
  db: Kysely<DB>,
  passer: Passer,
  ids: readonly number[],
  until: IsoTime,
): Promise<void> {
  if (ids.length === 0) return
  const { campaignId, personId } = passer
  await db
    .insertInto('sheet_lease')
    .values(ids.map((id) => ({ campaign_id: campaignId, candidate_id: id, person_id: personId, until })))
    .execute()
}

export async function renewSheet(db: Kysely<DB>, { campaignId, personId }: Passer, until: IsoTime): Promise<void> {
  await db
    .updateTable('sheet_lease')
    .set({ until })
    .where('campaign_id', '=', campaignId)
    .where('person_id', '=', personId)
    .execute()
}

/** Takes these from the person's sheet, or all that lies there. */
export async function clearSheet(
  db: Kysely<DB>,
  campaignId: number,
  personId: number,
  ids: readonly number[] | null,
): Promise<void> {
  await db
    .deleteFrom('sheet_lease')
    .where('campaign_id', '=', campaignId)
    .where('person_id', '=', personId)
    .$if(ids !== null, (query) => query.where(sql<SqlBool>`+candidate_id in ${among(ids!)}`))
    .execute()
}

/** Back on the person's sheet, but for what lies on another's by now. */
export async function layBackOnSheet(
  db: Kysely<DB>,
  { campaignId, personId }: Omit<Passer, 'now'>,
  ids: readonly number[],
  until: IsoTime,
): Promise<void> {
  if (ids.length === 0) return
  await sql`insert into sheet_lease (campaign_id, candidate_id, person_id, until)
    select ${campaignId}, candidate.id, ${personId}, ${until} from candidate
    where candidate.id in ${among(ids)} and (candidate.truth is not null or not exists (
      select 1 from sheet_lease held where held.candidate_id = candidate.id))
    on conflict do nothing`.execute(db)
}

/** Those of the ids that are known marks, each with whose. */
export async function listMarksByUid(
  db: Kysely<DB>,
  uids: readonly string[],
): Promise<(Pick<SheetMarkTable, 'uid' | 'mark'> & { candidateId: number; personId: number })[]> {
  return db
    .selectFrom('sheet_mark')
    .select(['uid', 'candidate_id as candidateId', 'person_id as personId', 'mark'])
    .where(sql<SqlBool>`uid in (select value from json_each(${JSON.stringify(uids)}))`)
    .execute()
}

export async function insertMarks(db: Kysely<DB>, marks: readonly Insertable<SheetMarkTable>[]): Promise<void> {
  if (marks.length > 0)
    await db
      .insertInto('sheet_mark')
      .values([...marks])
      .execute()
}

export interface StandingMark {
  candidateId: number
  personId: number
  mark: 'sent on' | 'dropped' | 'taken back'
}

/** The newest mark of each person at these candidates, up to a mark or as it is now; by candidate and person. */
export async function listStandingMarks(
  db: Kysely<DB>,
  candidates: { from: number; to: number } | readonly number[],
  upTo = Number.MAX_SAFE_INTEGER,
): Promise<StandingMark[]> {
  const which = Array.isArray(candidates)
    ? sql<SqlBool>`candidate_id in (select value from json_each(${JSON.stringify(candidates)}))`
    : sql<SqlBool>`candidate_id between ${(candidates as { from: number }).from} and ${(candidates as { to: number }).to}`
  const { rows } = await sql<StandingMark>`
    select candidate_id as candidateId, person_id as personId, mark, max(id) from sheet_mark
    where ${which} and id <= ${upTo} group by candidate_id, person_id order by candidate_id, person_id`.execute(db)
  return rows.map(({ candidateId, personId, mark }) => ({ candidateId, personId, mark }))
}

export interface CandidateToPass {
  id: number
  firstPass: FirstPass
  calibration: 0 | 1
  graded: 0 | 1
}

export async function listCandidatesToPass(
  db: Kysely<DB>,
  campaignId: number,
  ids: readonly number[],
): Promise<CandidateToPass[]> {
  return db
    .selectFrom('candidate')
    .select(['id', 'first_pass as firstPass'])
    .select([
      sql<0 | 1>`truth is not null`.as('calibration'),
      sql<0 | 1>`exists (select 1 from grade where grade.candidate_id = candidate.id)`.as('graded'),
    ])
    .where(inCampaign('campaign_id', campaignId))
    .where('id', 'in', among(ids))
    .where('imaged_at', 'is not', null)
    .execute()
}

export async function setFirstPass(db: Kysely<DB>, ids: readonly number[], firstPass: FirstPass): Promise<void> {
  if (ids.length === 0) return
  await db.updateTable('candidate').set({ first_pass: firstPass }).where('id', 'in', among(ids)).execute()
}

/** Of the counters: what no ruling has decided. */
export async function countFirstPass(db: Kysely<DB>, campaignId: number): Promise<Record<FirstPass, number>> {
  const rows = await db
    .selectFrom('queue_count')
    .select((e) => ['first_pass', e.fn.sum<number>('n').as('n')])
    .where('campaign_id', '=', campaignId)
    .where('person_id', '=', 0)
    .groupBy('first_pass')
    .execute()
  const counts = { waiting: 0, 'sent on': 0, dropped: 0 }
  for (const { first_pass, n } of rows) counts[first_pass] = n
  return counts
}

/** Marks of calibration stamps that are lenses, as they stand, without those of people to whom practice has told it. */
export async function listLensMarks(db: Kysely<DB>, campaignId: number): Promise<StandingMark[]> {
  const rows = await db
    .selectFrom('candidate')
    .select('id')
    .where('campaign_id', '=', campaignId)
    .where('truth', '=', 'lens')
    .where('imaged_at', 'is not', null)
    .execute()
  const told = await db
    .selectFrom('practice_answer')
    .select(['candidate_id as candidateId', 'person_id as personId'])
    .where('campaign_id', '=', campaignId)
    .execute()
  const known = new Set(told.map(({ candidateId, personId }) => `${candidateId} ${personId}`))
  const marks = await listStandingMarks(
    db,
    rows.map(({ id }) => id),
  )
  return marks.filter(({ candidateId, personId }) => !known.has(`${candidateId} ${personId}`))
}

export async function newestMarkId(db: Kysely<DB>, campaignId: number): Promise<number> {
  const row = await db
    .selectFrom('campaign')
    .select('uses_sheet')
    .select((e) =>
      e
        .selectFrom('sheet_mark')
        .select((m) => m.fn.max('sheet_mark.id').as('id'))
        .whereRef('sheet_mark.campaign_id', '=', 'campaign.id')
        .as('newest'),
    )
    .where('id', '=', campaignId)
    .executeTakeFirst()
  return row?.uses_sheet === 1 ? (row.newest ?? 0) : 0
}
