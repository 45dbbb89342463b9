import { sql, type Kysely, type SqlBool } from 'kysely'
import type { DB } from '../schema'
import type { SavedView, SavedViewTable } from '../schema/listing'
import type { IsoTime } from '../schema/values'

type Page = SavedViewTable['page']

export interface SavedViewRow extends SavedView {
  by: string
  /** Of whoever saved it, in the campaign; null for a former member. */
  pseudonym: string | null
}

/** A person's own views of a page, and those that members who lead the campaign now have shared; in the order of their names. */
export async function listSavedViews(
  db: Kysely<DB>,
  campaignId: number,
  page: Page,
  personId: number,
): Promise<SavedViewRow[]> {
  return db
    .selectFrom('saved_view')
    .innerJoin('person', 'person.id', 'saved_view.person_id')
    .leftJoin('membership', (join) =>
      join
        .onRef('membership.person_id', '=', 'saved_view.person_id')
        .onRef('membership.campaign_id', '=', 'saved_view.campaign_id'),
    )
    .selectAll('saved_view')
    .select(['person.name as by', 'membership.pseudonym'])
    .where('saved_view.campaign_id', '=', campaignId)
    .where('saved_view.page', '=', page)
    .where((e) =>
      e.or([
        e('saved_view.person_id', '=', personId),
        e.and([
          e('saved_view.shared', '=', 1),
          sql<SqlBool>`exists (select 1 from membership where membership.campaign_id = saved_view.campaign_id
            and membership.person_id = saved_view.person_id and membership.role = 'lead' and membership.ended_at is null)`,
        ]),
      ]),
    )
    .orderBy('saved_view.name')
    .orderBy('saved_view.id')
    .execute()
}

/** Of the person's own. */
export async function findOwnView(
  db: Kysely<DB>,
  campaignId: number,
  personId: number,
  of: { id: number } | { page: Page; name: string },
): Promise<SavedView | undefined> {
  const own = db
    .selectFrom('saved_view')
    .selectAll()
    .where('campaign_id', '=', campaignId)
    .where('person_id', '=', personId)
  return 'id' in of
    ? own.where('id', '=', of.id).executeTakeFirst()
    : own.where('page', '=', of.page).where('name', '=', of.name).executeTakeFirst()
}

export async function countOwnViews(db: Kysely<DB>, campaignId: number, personId: number, page: Page): Promise<number> {
  const row = await db
    .selectFrom('saved_view')
    .select((e) => e.fn.countAll<number>().as('n'))
    .where('campaign_id', '=', campaignId)
    .where('person_id', '=', personId)
    .where('page', '=', page)
    .executeTakeFirstOrThrow()
  return row.n
}

export async function insertSavedView(
  db: Kysely<DB>,
  view: {
    campaignId: number
    personId: number
    page: Page
    name: string
    query: string
    shared: boolean
    now: IsoTime
  },
): Promise<number> {
  const row = await db
    .insertInto('saved_view')
    .values({
      campaign_id: view.campaignId,
      person_id: view.personId,
      page: view.page,
      name: view.name,
      query: view.query,
      shared: view.shared ? 1 : 0,
      created_at: view.now,
      updated_at: view.now,
    })
    .returning('id')
    .executeTakeFirstOrThrow()
  return row.id
}

export async function updateSavedView(
  db: Kysely<DB>,
  id: number,
  change: { name: string; shared: boolean; now: IsoTime },
): Promise<void> {
  await db
    .updateTable('saved_view')
    .set({ name: change.name, shared: change.shared ? 1 : 0, updated_at: change.now })
    .where('id', '=', id)
    .execute()
}

export async function deleteSavedView(db: Kysely<DB>, id: number): Promise<void> {
  await db.deleteFrom('saved_view').where('id', '=', id).execute()
}
