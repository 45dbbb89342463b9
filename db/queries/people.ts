import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'
import type { Campaign } from '../schema/campaigns'
import type { Person, Role } from '../schema/people'

export async function findPerson(db: Kysely<DB>, id: number): Promise<Person | null> {
  return (await db.selectFrom('person').selectAll().where('id', '=', id).executeTakeFirst()) ?? null
}

/** Without regard to case: the column collates so. */
export async function findPersonByEmail(db: Kysely<DB>, email: string): Promise<Person | null> {
  return (await db.selectFrom('person').selectAll().where('email', '=', email.trim()).executeTakeFirst()) ?? null
}

export async function hasAdministrator(db: Kysely<DB>): Promise<boolean> {
  return (await countAdministrators(db)) > 0
}

export async function countAdministrators(db: Kysely<DB>): Promise<number> {
  const row = await db
    .selectFrom('person')
    .select((e) => e.fn.countAll<number>().as('n'))
    .where('is_admin', '=', 1)
    .where('left_at', 'is', null)
    .executeTakeFirstOrThrow()
  return row.n
}

export async function insertPerson(
  db: Kysely<DB>,
  person: { email: string; name: string; passwordHash: string | null; isAdmin: boolean; now: string },
): Promise<number> {
  const row = await db
    .insertInto('person')
    .values({
      email: person.email.trim(),
      name: person.name.trim(),
      password_hash: person.passwordHash,
      is_admin: person.isAdmin ? 1 : 0,
      created_at: person.now,
      left_at: null,
    })
    .returning('id')
    .executeTakeFirstOrThrow()
  return row.id
}

/** Ends every session of the account: the epoch that they were signed with no longer holds. */
export async function setPassword(db: Kysely<DB>, personId: number, passwordHash: string): Promise<void> {
  await db
    .updateTable('person')
    .set({ password_hash: passwordHash, session_epoch: sql`session_epoch + 1` })
    .where('id', '=', personId)
    .execute()
}

export async function setPersonName(db: Kysely<DB>, personId: number, name: string): Promise<void> {
  await db.updateTable('person').set({ name }).where('id', '=', personId).execute()
}

export async function setAdministrator(db: Kysely<DB>, personId: number, isAdmin: boolean): Promise<void> {
  await db
    .updateTable('person')
    .set({ is_admin: isAdmin ? 1 : 0 })
    .where('id', '=', personId)
    .execute()
}

export interface Account {
  id: number
  name: string
  email: string | null
  isAdmin: 0 | 1
  createdAt: string
  campaigns: number
}

/** Every account in use, by name, with the number of campaigns it is in. */
export async function listAccounts(db: Kysely<DB>): Promise<Account[]> {
  return db
    .selectFrom('person')
    .leftJoin('membership', (join) =>
      join.onRef('membership.person_id', '=', 'person.id').on('membership.ended_at', 'is', null),
    )
    .select([
      'person.id',
      'person.name',
      'person.email',
      'person.is_admin as isAdmin',
      'person.created_at as createdAt',
    ])
    .select((e) => e.fn.count<number>('membership.id').as('campaigns'))
    .where('person.left_at', 'is', null)
    .groupBy('person.id')
    .orderBy('person.name')
    .execute()
}

export async function findCampaignMembership(
  db: Kysely<DB>,
  slug: string,
  personId: number,
): Promise<{ campaign: Campaign; role: Role } | null> {
  const row = await db
    .selectFrom('campaign')
    .innerJoin('membership', 'membership.campaign_id', 'campaign.id')
    .selectAll('campaign')
    .select('membership.role')
    .where('campaign.slug', '=', slug)
    .where('membership.person_id', '=', personId)
    .where('membership.ended_at', 'is', null)
    .executeTakeFirst()
  if (!row) return null
  const { role, ...campaign } = row
  return { campaign, role }
}

export interface Member {
  personId: number
  name: string
  email: string | null
  role: Role
  pseudonym: string
  createdAt: string
}

export async function listMembers(db: Kysely<DB>, campaignId: number): Promise<Member[]> {
  return db
    .selectFrom('membership')
    .innerJoin('person', 'person.id', 'membership.person_id')
    .select([
      'person.id as personId',
      'person.name',
      'person.email',
      'membership.role',
      'membership.pseudonym',
      'membership.created_at as createdAt',
    ])
    .where('membership.campaign_id', '=', campaignId)
    .where('membership.ended_at', 'is', null)
    .orderBy('membership.id')
    .execute()
}

/** Adds the person, or gives an earlier or present member the role. The pseudonym of a row that exists stays. */
export async function upsertMembership(
  db: Kysely<DB>,
  member: { campaignId: number; personId: number; role: Role; pseudonym: string; now: string },
): Promise<void> {
  await db
    .insertInto('membership')
    .values({
      campaign_id: member.campaignId,
      person_id: member.personId,
      role: member.role,
      pseudonym: member.pseudonym,
      created_at: member.now,
      ended_at: null,
    })
    .onConflict((conflict) =>
      conflict.columns(['campaign_id', 'person_id']).doUpdateSet({ role: member.role, ended_at: null }),
    )
    .execute()
}

/** Pseudonyms of everybody who is or was in the campaign. */
export async function listPseudonyms(db: Kysely<DB>, campaignId: number): Promise<string[]> {
  const rows = await db.selectFrom('membership').select('pseudonym').where('campaign_id', '=', campaignId).execute()
  return rows.map((row) => row.pseudonym)
}

/** Also one that has ended. */
export async function findMembership(
  db: Kysely<DB>,
  campaignId: number,
  personId: number,
): Promise<{ role: Role; pseudonym: string; endedAt: string | null; name: string } | null> {
  const row = await db
    .selectFrom('membership')
    .innerJoin('person', 'person.id', 'membership.person_id')
    .select(['membership.role', 'membership.pseudonym', 'membership.ended_at as endedAt', 'person.name'])
    .where('membership.campaign_id', '=', campaignId)
    .where('membership.person_id', '=', personId)
    .executeTakeFirst()
  return row ?? null
}

export async function countLeads(db: Kysely<DB>, campaignId: number): Promise<number> {
  const row = await db
    .selectFrom('membership')
    .select((e) => e.fn.countAll<number>().as('n'))
    .where('campaign_id', '=', campaignId)
    .where('role', '=', 'lead')
    .where('ended_at', 'is', null)
    .executeTakeFirstOrThrow()
  return row.n
}

export async function setMembership(
  db: Kysely<DB>,
  campaignId: number,
  personId: number,
  change: { role?: Role; ended_at?: string },
): Promise<void> {
  await db
    .updateTable('membership')
    .set(change)
    .where('campaign_id', '=', campaignId)
    .where('person_id', '=', personId)
    .execute()
}

export async function getSiteValue(db: Kysely<DB>, key: string): Promise<string | null> {
  const row = await db.selectFrom('site').select('value').where('key', '=', key).executeTakeFirst()
  return row?.value ?? null
}

export async function setSiteValue(db: Kysely<DB>, key: string, value: string): Promise<void> {
  await db
    .insertInto('site')
    .values({ key, value })
    .onConflict((conflict) => conflict.column('key').doUpdateSet({ value }))
    .execute()
}

export async function deleteSiteValues(db: Kysely<DB>, keys: string[]): Promise<void> {
  await db.deleteFrom('site').where('key', 'in', keys).execute()
}

export async function leadsSomeCampaign(db: Kysely<DB>, personId: number): Promise<boolean> {
  const row = await db
    .selectFrom('membership')
    .select('id')
    .where('person_id', '=', personId)
    .where('role', '=', 'lead')
    .where('ended_at', 'is', null)
    .executeTakeFirst()
  return row !== undefined
}
