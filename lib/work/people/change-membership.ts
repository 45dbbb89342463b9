import 'server-only'
import type { Kysely } from 'kysely'
import { setAsksWithdrawn } from '@/db/queries/asked-looks'
import { withdrawInvitationsBy } from '@/db/queries/invitations'
import { countLeads, findMembership, setMembership } from '@/db/queries/people'
import { deleteLeases } from '@/db/queries/queue'
import type { DB } from '@/db/schema'
import type { Role } from '@/db/schema/people'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import { conflict, notFound } from '@/lib/platform/problems/problem'
import { forgetDeadLinks } from './forget-links'
import { roleMay, type CampaignPermit } from './permission'

async function requireMember(db: Kysely<DB>, permit: CampaignPermit<'lead'>, personId: number) {
  const membership = await findMembership(db, permit.campaign.id, personId)
  if (!membership || membership.endedAt !== null) throw notFound('member')
  return membership
}

/** A campaign that nobody leads could never be led again. */
async function assertLeadRemains(db: Kysely<DB>, campaignId: number, name: string): Promise<void> {
  if ((await countLeads(db, campaignId)) > 1) return
  throw conflict('last-lead', `${name} is the only lead of this campaign. Make somebody else a lead first.`)
}

/** What a person could do in the campaign ends with their rights: the links they sent, the candidates on their bench, looks asked. */
async function endRights(
  db: Kysely<DB>,
  campaignId: number,
  personId: number,
  ended: { lead: boolean; grade: boolean },
): Promise<{ invitationsWithdrawn?: number }> {
  if (ended.grade) {
    await deleteLeases(db, campaignId, personId, null)
    await setAsksWithdrawn(db, { campaignId, personId }, isoTime())
  }
  const withdrawn = ended.lead ? await withdrawInvitationsBy(db, campaignId, personId, isoTime()) : 0
  if (withdrawn > 0) await forgetDeadLinks(db)
  return withdrawn > 0 ? { invitationsWithdrawn: withdrawn } : {}
}

export async function changeRole(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  input: { personId: number; role: Role },
): Promise<{ name: string }> {
  const { campaign, viewer } = permit
  return db.transaction().execute(async (transaction) => {
    const { name, role: before } = await requireMember(transaction, permit, input.personId)
    if (before === input.role) return { name }
    if (before === 'lead') await assertLeadRemains(transaction, campaign.id, name)
    await setMembership(transaction, campaign.id, input.personId, { role: input.role })
    const ended = { lead: before === 'lead', grade: !roleMay(input.role, 'grade') }
    const rights = await endRights(transaction, campaign.id, input.personId, ended)
    await recordEvent(transaction, {
      personId: viewer.id,
      campaignId: campaign.id,
      action: 'people.role-changed',
      subject: String(input.personId),
      detail: { from: before, to: input.role, ...rights },
    })
    return { name }
  })
}

/** The person's grades stay and so does the pseudonym, in case they come back. */
export async function endMembership(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  personId: number,
): Promise<{ name: string }> {
  const { campaign, viewer } = permit
  return db.transaction().execute(async (transaction) => {
    const { name, role } = await requireMember(transaction, permit, personId)
    if (role === 'lead') await assertLeadRemains(transaction, campaign.id, name)
    await setMembership(transaction, campaign.id, personId, { ended_at: isoTime() })
    const detail = await endRights(transaction, campaign.id, personId, { lead: true, grade: true })
    await recordEvent(transaction, {
      personId: viewer.id,
      campaignId: campaign.id,
      action: 'people.membership-ended',
      subject: String(personId),
      detail,
    })
    return { name }
  })
}
