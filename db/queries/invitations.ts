import type { Kysely } from 'kysely'
import type { DB } from '../schema'
import type { Invitation, Role } from '../schema/people'

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

/** The invitations of a campaign that could still be accepted, to be taken back. */
function withdrawOpen(db: Kysely<DB>, campaignId: number, now: string) {
  return db
    .updateTable('invitation')
    .set({ withdrawn_at: now })
    .where('campaign_id', '=', campaignId)
    .where('accepted_at', 'is', null)
    .where('withdrawn_at', 'is', null)
}

/** Takes back every open invitation of this address to this campaign: only the newest link works. */
export async function withdrawInvitations(
  db: Kysely<DB>,
  campaignId: number,
  email: string,
  now: string,
): Promise<number> {
  const result = await withdrawOpen(db, campaignId, now).where('email', '=', email).executeTakeFirst()
  return Number(result.numUpdatedRows)
}

/** Takes back what this person has invited to this campaign and nobody has accepted. */
export async function withdrawInvitationsBy(
  db: Kysely<DB>,
  campaignId: number,
  invitedBy: number,
  now: string,
): Promise<number> {
  const result = await withdrawOpen(db, campaignId, now).where('invited_by', '=', invitedBy).executeTakeFirst()
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

export interface FoundInvitation extends Invitation {
  campaignName: string
  slug: string
  invitedByName: string
}

export async function findInvitation(db: Kysely<DB>, tokenHash: string): Promise<FoundInvitation | null> {
  const row = await db
    .selectFrom('invitation')
    .innerJoin('campaign', 'campaign.id', 'invitation.campaign_id')
    .innerJoin('person', 'person.id', 'invitation.invited_by')
    .selectAll('invitation')
    .select(['campaign.name as campaignName', 'campaign.slug', 'person.name as invitedByName'])
    .where('invitation.token_hash', '=', tokenHash)
    .executeTakeFirst()
  return row ?? null
}

export async function findCampaignInvitation(
  db: Kysely<DB>,
  campaignId: number,
  id: number,
): Promise<Invitation | null> {
  const row = await db
    .selectFrom('invitation')
    .selectAll()
    .where('campaign_id', '=', campaignId)
    .where('id', '=', id)
    .executeTakeFirst()
  return row ?? null
}

export async function setInvitationWithdrawn(db: Kysely<DB>, id: number, now: string): Promise<void> {
  await db.updateTable('invitation').set({ withdrawn_at: now }).where('id', '=', id).execute()
}

export async function setInvitationAccepted(db: Kysely<DB>, id: number, personId: number, now: string): Promise<void> {
  await db.updateTable('invitation').set({ accepted_at: now, accepted_by: personId }).where('id', '=', id).execute()
}

export async function setInvitationMail(db: Kysely<DB>, id: number, mailId: number): Promise<void> {
  await db.updateTable('invitation').set({ mail_id: mailId }).where('id', '=', id).execute()
}

/** Mails still here with their text, whose invitation was used, withdrawn or has expired. */
export async function listMailsOfDeadInvitations(db: Kysely<DB>, now: string): Promise<{ id: number; body: string }[]> {
  return db
    .selectFrom('invitation')
    .innerJoin('mail', 'mail.id', 'invitation.mail_id')
    .select(['mail.id', 'mail.body'])
    .where('mail.state', '!=', 'sent')
    .where((e) =>
      e.or([
        e('invitation.accepted_at', 'is not', null),
        e('invitation.withdrawn_at', 'is not', null),
        e('invitation.expires_at', '<=', now),
      ]),
    )
    .execute()
}
