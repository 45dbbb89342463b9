import 'server-only'
import type { Kysely } from 'kysely'
import { listOpenInvitations } from '@/db/queries/invitations'
import { listMembers, type Member } from '@/db/queries/people'
import type { DB } from '@/db/schema'
import type { Role } from '@/db/schema/people'
import { isoTime } from '@/lib/platform/clock'
import { mailLeavesSite } from '@/lib/platform/mail/queue-mail'
import type { CampaignPermit } from './permission'

export interface InvitationRow {
  id: number
  email: string
  role: Role
  createdAt: string
  expiresAt: string
  expired: boolean
}

export interface CampaignPeople {
  members: Member[]
  invitations: InvitationRow[]
  /** false: invitations wait in the outbox until an administrator passes them on. */
  mailLeavesSite: boolean
}

/** Members and invitations that nobody has answered yet. */
export async function listPeople(db: Kysely<DB>, permit: CampaignPermit<'lead'>): Promise<CampaignPeople> {
  const [members, invitations] = await Promise.all([
    listMembers(db, permit.campaign.id),
    listOpenInvitations(db, permit.campaign.id),
  ])
  const now = isoTime()
  return {
    members,
    invitations: invitations.map((invitation) => ({ ...invitation, expired: invitation.expiresAt <= now })),
    mailLeavesSite: mailLeavesSite(),
  }
}
