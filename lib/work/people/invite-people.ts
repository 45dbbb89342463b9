import 'server-only'
import type { Kysely } from 'kysely'
import { z } from 'zod'
import {
  findCampaignInvitation,
  insertInvitation,
  setInvitationMail,
  setInvitationWithdrawn,
  withdrawInvitations,
} from '@/db/queries/invitations'
import { findMembership, findPersonByEmail } from '@/db/queries/people'
import type { DB } from '@/db/schema'
import type { Role } from '@/db/schema/people'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import { config } from '@/lib/platform/config/config'
import { queueMail } from '@/lib/platform/mail/queue-mail'
import { conflict, notFound } from '@/lib/platform/problems/problem'
import { forgetDeadLinks } from './forget-links'
import { INVITATION_DAYS, invitationMail } from './invitation-mail'
import type { CampaignPermit } from './permission'
import { hashSecret, newToken } from './secrets'

const DAY_MS = 24 * 3600 * 1000
const MOST_ADDRESSES = 100

export const RoleInput = z.enum(['lead', 'grader', 'viewer'], 'Choose lead, grader or viewer.')

/** Addresses apart by commas, semicolons, blanks or lines; the same one twice is one. */
const Addresses = z
  .string()
  .transform((text) => [
    ...new Map(
      text
        .split(/[\s,;]+/)
        .filter(Boolean)
        .map((one) => [one.toLowerCase(), one]),
    ).values(),
  ])
  .superRefine((addresses, context) => {
    const wrong = addresses.filter((address) => !z.email().max(254).safeParse(address).success)
    const refuse = (message: string) => context.addIssue({ code: 'custom', message })
    if (addresses.length === 0) refuse('Enter at least one e-mail address.')
    if (addresses.length > MOST_ADDRESSES) refuse(`Invite at most ${MOST_ADDRESSES} people at once.`)
    if (wrong.length)
      refuse(`No e-mail address: ${wrong.slice(0, 5).join(', ')}. Correct or remove it; nobody was invited yet.`)
  })

export const InviteInput = z.object({ emails: Addresses, role: RoleInput })
export type InviteInput = z.output<typeof InviteInput>

/** Invitation, mail, job and audit event: all or none. An older open invitation of the address stops working. */
async function inviteOne(
  transaction: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  email: string,
  role: Role,
): Promise<void> {
  const { campaign, viewer } = permit
  const token = newToken()
  const now = isoTime()
  await withdrawInvitations(transaction, campaign.id, email, now)
  const id = await insertInvitation(transaction, {
    campaignId: campaign.id,
    email,
    role,
    tokenHash: hashSecret(token),
    invitedBy: viewer.id,
    now,
    expiresAt: isoTime(INVITATION_DAYS * DAY_MS),
  })
  const link = `${config().siteUrl}/invitation/${token}`
  const { name: campaignName, survey } = campaign
  const mail = invitationMail({ email, role, campaignName, survey, invitedBy: viewer.name, link })
  await setInvitationMail(transaction, id, await queueMail(transaction, mail))
  await forgetDeadLinks(transaction)
  await recordEvent(transaction, {
    personId: viewer.id,
    campaignId: campaign.id,
    action: 'people.invited',
    subject: String(id),
    detail: { role },
  })
}

async function isMember(db: Kysely<DB>, campaignId: number, email: string): Promise<boolean> {
  const person = await findPersonByEmail(db, email)
  const membership = person && (await findMembership(db, campaignId, person.id))
  return membership !== null && membership.endedAt === null
}

/** Invites each address that is not a member yet and says which were. @throws Problem 409 when all are members already. */
export async function invitePeople(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  input: InviteInput,
): Promise<{ invited: string[]; members: string[] }> {
  return db.transaction().execute(async (transaction) => {
    const invited: string[] = []
    const members: string[] = []
    for (const email of input.emails) {
      if (await isMember(transaction, permit.campaign.id, email)) {
        members.push(email)
        continue
      }
      await inviteOne(transaction, permit, email, input.role)
      invited.push(email)
    }
    if (invited.length === 0) {
      const sentence = `${members.join(', ')} ${members.length === 1 ? 'is a member' : 'are members'} already. Change a role in the list above.`
      throw conflict('already-members', sentence)
    }
    return { invited, members }
  })
}

/** The invitation of this campaign, if it still waits for an answer (expired or not). */
async function requireOpenInvitation(db: Kysely<DB>, permit: CampaignPermit<'lead'>, id: number) {
  const invitation = await findCampaignInvitation(db, permit.campaign.id, id)
  if (!invitation) throw notFound('invitation')
  if (invitation.accepted_at)
    throw conflict('invitation-used', `${invitation.email} has accepted this invitation already.`)
  if (invitation.withdrawn_at) {
    throw conflict(
      'invitation-withdrawn',
      'This invitation was withdrawn or replaced already. Invite the address anew.',
    )
  }
  return invitation
}

/** A fresh link in a fresh mail; the earlier one stops working. */
export async function sendInvitationAgain(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  invitationId: number,
): Promise<{ email: string }> {
  return db.transaction().execute(async (transaction) => {
    const { email, role } = await requireOpenInvitation(transaction, permit, invitationId)
    await inviteOne(transaction, permit, email, role)
    return { email }
  })
}

export async function withdrawInvitation(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  invitationId: number,
): Promise<{ email: string }> {
  return db.transaction().execute(async (transaction) => {
    const { id, email } = await requireOpenInvitation(transaction, permit, invitationId)
    await setInvitationWithdrawn(transaction, id, isoTime())
    await forgetDeadLinks(transaction)
    await recordEvent(transaction, {
      personId: permit.viewer.id,
      campaignId: permit.campaign.id,
      action: 'people.invitation-withdrawn',
      subject: String(id),
    })
    return { email }
  })
}
