import type { Kysely } from 'kysely'
import type { DB } from '../schema'
import type { Campaign } from '../schema/campaigns'
import type { Invitation, Person, Role } from '../schema/people'

export async function findPerson(db: Kysely<DB>, id: number): Promise<Person | null> {
  return (await db.selectFrom('person').selectAll().where('id', '=', id).executeTakeFirst()) ?? null
}

/** Without regard to case: the column collates so. */
export async function findPersonByEmail(db: Kysely<DB>, email: string): Promise<Person | null> {
  return (await db.selectFrom('person').selectAll().where('email', '=', email.trim()).executeTakeFirst()) ?? null
}

export async function hasAdministrator(db: Kysely<DB>): Promise<boolean> {
  return (await db.selectFrom('person').select('id').where('is_admin', '=', 1).executeTakeFirst()) !== undefined
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

export async function setPassword(db: Kysely<DB>, personId: number, passwordHash: string): Promise<void> {
  await db.updateTable('person').set({ password_hash: passwordHash }).where('id', '=', personId).execute()
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

export async function countMembershipsEver(db: Kysely<DB>, campaignId: number): Promise<number> {
  const row = await db
    .selectFrom('membership')
    .select((e) => e.fn.countAll<number>().as('n'))
    .where('campaign_id', '=', campaignId)
    .executeTakeFirstOrThrow()
  return row.n
}

export async function insertInvitation(
  db: Kysely<DB>,
  invitation: {
    campaignId: number
    email: string
    role: Role
    tokenHash: string
    invitedBy: number
    now: string
    expiresAt: string
  },
): Promise<number> {
  const row = await db
    .insertInto('invitation')
    .values({
      campaign_id: invitation.campaignId,
      email: invitation.email,
      role: invitation.role,
      token_hash: invitation.tokenHash,
      invited_by: invitation.invitedBy,
      created_at: invitation.now,
      expires_at: invitation.expiresAt,
      accepted_at: null,
      accepted_by: null,
      withdrawn_at: null,
    })
    .returning('id')
    .executeTakeFirstOrThrow()
  return row.id
}

/** Takes back every open invitation of this address to this campaign: only the newest link works. */
export async function withdrawInvitations(
  db: Kysely<DB>,
  campaignId: number,
  email: string,
  now: string,
): Promise<number> {
  const result = await db
    .updateTable('invitation')
    .set({ withdrawn_at: now })
    .where('campaign_id', '=', campaignId)
    .where('email', '=', email)
    .where('accepted_at', 'is', null)
    .where('withdrawn_at', 'is', null)
    .executeTakeFirst()
  return Number(result.numUpdatedRows)
}

export interface OpenInvitation {
  id: number
  email: string
  role: Role
  createdAt: string
  expiresAt: string
}

export async function listOpenInvitations(db: Kysely<DB>, campaignId: number): Promise<OpenInvitation[]> {
  return db
    .selectFrom('invitation')
    .select(['id', 'email', 'role', 'created_at as createdAt', 'expires_at as expiresAt'])
    .where('campaign_id', '=', campaignId)
    .where('accepted_at', 'is', null)
    .where('withdrawn_at', 'is', null)
    .orderBy('id', 'desc')
    .execute()
}

export async function findInvitation(
  db: Kysely<DB>,
  tokenHash: string,
): Promise<(Invitation & { campaignName: string; slug: string }) | null> {
  const row = await db
    .selectFrom('invitation')
    .innerJoin('campaign', 'campaign.id', 'invitation.campaign_id')
    .selectAll('invitation')
    .select(['campaign.name as campaignName', 'campaign.slug'])
    .where('token_hash', '=', tokenHash)
    .executeTakeFirst()
  return row ?? null
}

export async function setInvitationAccepted(db: Kysely<DB>, id: number, personId: number, now: string): Promise<void> {
  await db.updateTable('invitation').set({ accepted_at: now, accepted_by: personId }).where('id', '=', id).execute()
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
