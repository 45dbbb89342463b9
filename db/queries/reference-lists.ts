import { sql, type Insertable, type Kysely, type Updateable } from 'kysely'
import type { DB } from '../schema'
import type { ListState, ReferenceList, ReferenceListTable } from '../schema/matching'

export async function findList(db: Kysely<DB>, campaignId: number, listId: number): Promise<ReferenceList | null> {
  const row = await db
    .selectFrom('reference_list')
    .selectAll()
    .where('id', '=', listId)
    .where('campaign_id', '=', campaignId)
    .executeTakeFirst()
  return row ?? null
}

/** For the job, which knows no campaign. */
export async function findListById(db: Kysely<DB>, listId: number): Promise<ReferenceList | null> {
  return (await db.selectFrom('reference_list').selectAll().where('id', '=', listId).executeTakeFirst()) ?? null
}

/** Whether a job still has to read the list, or does. */
export async function isBeingRead(db: Kysely<DB>, list: { id: number; campaign_id: number }): Promise<boolean> {
  const row = await db
    .selectFrom('job')
    .select('id')
    .where('campaign_id', '=', list.campaign_id)
    .where('kind', '=', 'read-list')
    .where('state', 'in', ['queued', 'running'])
    .where(sql<number>`json_extract(payload, '$.listId')`, '=', list.id)
    .executeTakeFirst()
  return row !== undefined
}

export async function findListOfFile(db: Kysely<DB>, campaignId: number, sha256: string): Promise<number | null> {
  const row = await db
    .selectFrom('reference_list')
    .select('id')
    .where('campaign_id', '=', campaignId)
    .where('sha256', '=', sha256)
    .executeTakeFirst()
  return row?.id ?? null
}

export async function insertList(db: Kysely<DB>, list: Insertable<ReferenceListTable>): Promise<number> {
  const { id } = await db.insertInto('reference_list').values(list).returning('id').executeTakeFirstOrThrow()
  return id
}

/** Changes the list where it is in one of these states; returns whether it was. */
export async function updateList(
  db: Kysely<DB>,
  listId: number,
  states: readonly ListState[],
  change: Updateable<ReferenceListTable>,
): Promise<boolean> {
  const { numUpdatedRows } = await db
    .updateTable('reference_list')
    .set(change)
    .where('id', '=', listId)
    .where('state', 'in', [...states])
    .executeTakeFirst()
  return numUpdatedRows > 0n
}

/** Takes a list away of which nothing was ever in force; returns whether it was one. */
export async function deleteUnusedList(db: Kysely<DB>, listId: number): Promise<boolean> {
  const { numAffectedRows } = await sql`
    delete from reference_list where id = ${listId} and state in ('draft', 'refused')
      and not exists (select 1 from reference_object where list_id = ${listId})
      and not exists (select 1 from object_match where list_id = ${listId})
      and not exists (select 1 from match_decision where list_id = ${listId})`.execute(db)
  return (numAffectedRows ?? 0n) > 0n
}

export interface ListOfCampaign extends ReferenceList {
  uploadedBy: string
  /** Candidates that a match of this list stands of. */
  matched: number
}

/** Every list, the newest first, those retired last. */
export async function listLists(db: Kysely<DB>, campaignId: number): Promise<ListOfCampaign[]> {
  return db
    .selectFrom('reference_list')
    .innerJoin('person', 'person.id', 'reference_list.uploaded_by')
    .selectAll('reference_list')
    .select('person.name as uploadedBy')
    .select(
      sql<number>`(select count(distinct m.candidate_id) from object_match m where m.list_id = reference_list.id
        and ifnull((select d.decision from match_decision d where d.candidate_id = m.candidate_id
          and d.list_id = m.list_id and d.row_number = m.row_number order by d.id desc limit 1), '') <> 'different')`.as(
        'matched',
      ),
    )
    .where('reference_list.campaign_id', '=', campaignId)
    .orderBy(sql`reference_list.state = 'retired'`)
    .orderBy('reference_list.id', 'desc')
    .execute()
}

/** Candidates that some list in force knows. */
export async function countKnown(db: Kysely<DB>, campaignId: number): Promise<number> {
  const { rows } = await sql<{ count: number }>`
    select count(distinct m.candidate_id) as count from reference_list l cross join object_match m
    where l.campaign_id = ${campaignId} and l.state = 'ready' and m.list_id = l.id
      and ifnull((select d.decision from match_decision d where d.candidate_id = m.candidate_id
        and d.list_id = m.list_id and d.row_number = m.row_number order by d.id desc limit 1), '') <> 'different'`.execute(
    db,
  )
  return rows[0].count
}

/** `part` is JSON of a list of `[row, name, ra, dec, redshift, more]`. */
export async function insertObjects(db: Kysely<DB>, listId: number, part: string): Promise<void> {
  await sql`
    insert into reference_object (list_id, row_number, name, ra_deg, dec_deg, redshift, more)
    select ${listId}, value ->> 0, value ->> 1, value ->> 2, value ->> 3, value ->> 4, value ->> 5
    from json_each(${part})`.execute(db)
}

/** Takes some of the list's rows away; returns how many. */
export async function deleteSomeObjects(db: Kysely<DB>, listId: number, limit: number): Promise<number> {
  const { numAffectedRows } = await sql`
    delete from reference_object where list_id = ${listId} and row_number <= (
      select max(row_number) from (
        select row_number from reference_object where list_id = ${listId} order by row_number limit ${limit}))`.execute(
    db,
  )
  return Number(numAffectedRows ?? 0n)
}

export interface ListWork {
  kind: string
  listId: number | null
  done: number
  total: number
}

/** Jobs of the room that wait or run, with how far they are. */
export async function listListWork(db: Kysely<DB>, campaignId: number, kinds: readonly string[]): Promise<ListWork[]> {
  return db
    .selectFrom('job')
    .select(['kind', 'done', 'total'])
    .select(sql<number | null>`payload ->> 'listId'`.as('listId'))
    .where('campaign_id', '=', campaignId)
    .where('state', 'in', ['queued', 'running'])
    .where('kind', 'in', [...kinds])
    .orderBy('id')
    .execute()
}

export async function setMatchRadius(db: Kysely<DB>, campaignId: number, radiusArcsec: number): Promise<void> {
  await db.updateTable('campaign').set({ match_radius_arcsec: radiusArcsec }).where('id', '=', campaignId).execute()
}
