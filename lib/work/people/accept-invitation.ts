import 'server-only'
import type { Kysely } from 'kysely'
import { z } from 'zod'
import { findInvitation, setInvitationAccepted, type FoundInvitation } from '@/db/queries/invitations'
import {
  findMembership,
  findPersonByEmail,
  insertPerson,
  listPseudonyms,
  setPassword,
  setPersonName,
  upsertMembership,
} from '@/db/queries/people'
import type { DB } from '@/db/schema'
import type { Role } from '@/db/schema/people'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import { conflict, forbidden, notFound, type Problem, signInNeeded } from '@/lib/platform/problems/problem'
import { forgetDeadLinks } from './forget-links'
import { hashPassword, Password } from './passwords'
import { PersonName } from './person-input'
import { nextPseudonym } from './pseudonyms'
import { hashSecret } from './secrets'
import type { Viewer } from './viewer'

export type InvitationView =
  | {
      kind: 'open'
      campaignName: string
      slug: string
      email: string
      role: Role
      invitedByName: string
      hasAccount: boolean
    }
  | { kind: 'unknown' | 'expired' | 'withdrawn' | 'used' }

function standing(invitation: FoundInvitation | null): 'open' | 'unknown' | 'expired' | 'withdrawn' | 'used' {
  if (!invitation) return 'unknown'
  if (invitation.accepted_at) return 'used'
  if (invitation.withdrawn_at) return 'withdrawn'
  return invitation.expires_at <= isoTime() ? 'expired' : 'open'
}

/** Whoever holds the link may read what it is for. */
export async function readInvitation(db: Kysely<DB>, token: string): Promise<InvitationView> {
  const invitation = await findInvitation(db, hashSecret(token))
  const kind = standing(invitation)
  if (kind !== 'open' || !invitation) return { kind: kind === 'open' ? 'unknown' : kind }
  const { campaignName, slug, email, role, invitedByName } = invitation
  const account = await findPersonByEmail(db, email)
  return { kind, campaignName, slug, email, role, invitedByName, hasAccount: account?.password_hash != null }
}

const REFUSED: Record<'expired' | 'withdrawn' | 'used', Problem> = {
  expired: conflict(
    'invitation-expired',
    'This invitation has expired. Ask the lead who invited you to send it again.',
  ),
  withdrawn: conflict(
    'invitation-withdrawn',
    'This invitation was withdrawn or replaced by a newer one. Look for a newer mail, or ask the lead who invited you.',
  ),
  used: conflict('invitation-used', 'This invitation was accepted already. Sign in to get to the campaign.'),
}

async function requireOpen(db: Kysely<DB>, token: string): Promise<FoundInvitation> {
  const invitation = await findInvitation(db, hashSecret(token))
  const kind = standing(invitation)
  if (!invitation || kind === 'unknown') throw notFound('invitation')
  if (kind !== 'open') throw REFUSED[kind]
  return invitation
}

const RANK: Record<Role, number> = { viewer: 0, grader: 1, lead: 2 }

/** Somebody who came back keeps the old pseudonym; a role that is larger already is never made smaller by a link. */
async function join(transaction: Kysely<DB>, invitation: FoundInvitation, personId: number): Promise<void> {
  const campaignId = invitation.campaign_id
  const now = isoTime()
  const before = await findMembership(transaction, campaignId, personId)
  const keeps = before && before.endedAt === null && RANK[before.role] > RANK[invitation.role]
  const role = keeps ? before.role : invitation.role
  const pseudonym = before?.pseudonym ?? nextPseudonym(await listPseudonyms(transaction, campaignId))
  await upsertMembership(transaction, { campaignId, personId, role, pseudonym, now })
  await setInvitationAccepted(transaction, invitation.id, personId, now)
  await forgetDeadLinks(transaction)
  const subject = String(invitation.id)
  await recordEvent(transaction, {
    personId,
    campaignId,
    action: 'people.joined',
    subject,
    detail: { role, pseudonym },
  })
}

export const NewPersonInput = z.object({ name: PersonName, password: Password })
export type NewPersonInput = z.output<typeof NewPersonInput>

/** For an address without an account: makes it. Holding the link shows that the address is theirs. */
export async function acceptAsNewPerson(
  db: Kysely<DB>,
  token: string,
  input: NewPersonInput,
): Promise<{ email: string; slug: string }> {
  await requireOpen(db, token)
  const passwordHash = await hashPassword(input.password)
  return db.transaction().execute(async (transaction) => {
    const invitation = await requireOpen(transaction, token)
    const account = await findPersonByEmail(transaction, invitation.email)
    if (account?.password_hash) {
      throw conflict('account-exists', `${invitation.email} has an account already. Sign in with it to accept.`)
    }
    let personId = account?.id
    if (personId === undefined) {
      const { email } = invitation
      personId = await insertPerson(transaction, {
        email,
        name: input.name,
        passwordHash,
        isAdmin: false,
        now: isoTime(),
      })
    } else {
      await setPersonName(transaction, personId, input.name)
      await setPassword(transaction, personId, passwordHash)
    }
    await join(transaction, invitation, personId)
    return { email: invitation.email, slug: invitation.slug }
  })
}

/** For an address with an account: only the person with that address may accept, whoever else holds the link. */
export async function acceptAsViewer(db: Kysely<DB>, viewer: Viewer | null, token: string): Promise<{ slug: string }> {
  if (!viewer) throw signInNeeded()
  return db.transaction().execute(async (transaction) => {
    const invitation = await requireOpen(transaction, token)
    if (invitation.email.toLowerCase() !== viewer.email.toLowerCase()) {
      throw forbidden(
        `This invitation is for ${invitation.email}, and you are signed in as ${viewer.email}. Sign out and sign in with that address, or ask the lead to invite ${viewer.email}.`,
      )
    }
    await join(transaction, invitation, viewer.id)
    return { slug: invitation.slug }
  })
}
