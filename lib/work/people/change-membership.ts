import 'server-only'
import type { Kysely } from 'kysely'
import { countLeads, findMembership, setMembership } from '@/db/queries/people'
import type { DB } from '@/db/schema'
import type { Role } from '@/db/schema/people'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import { conflict, notFound } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from './permission'

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
    await recordEvent(transaction, {
      personId: viewer.id,
      campaignId: campaign.id,
      action: 'people.role-changed',
      subject: String(input.personId),
      detail: { from: before, to: input.role },
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
    await recordEvent(transaction, {
      personId: viewer.id,
      campaignId: campaign.id,
      action: 'people.membership-ended',
      subject: String(personId),
    })
    return { name }
  })
}
