import 'server-only'
import type { Kysely } from 'kysely'
import { findCampaignMembership } from '@/db/queries/people'
import type { DB } from '@/db/schema'
import type { Campaign } from '@/db/schema/campaigns'
import type { Role } from '@/db/schema/people'
import { forbidden, notFound, signInNeeded } from '@/lib/platform/problems/problem'
import type { Viewer } from './viewer'

/**
 * Who may do what. A use case takes a permit, and only the functions below make one, so a use case that forgot to ask does
 * not compile. Roles belong to one campaign; an administrator has no way into a campaign without a membership.
 */
export type Capability = 'read' | 'grade' | 'lead'

interface Included {
  read: { read: true }
  grade: { read: true; grade: true }
  lead: { read: true; grade: true; lead: true }
}

const GRANTS: Record<Role, readonly Capability[]> = {
  viewer: ['read'],
  grader: ['read', 'grade'],
  lead: ['read', 'grade', 'lead'],
}

const NEEDS: Record<Capability, string> = {
  read: 'Reading this campaign takes a membership in it.',
  grade: 'Grading takes the role of a grader or a lead in this campaign. Ask one of its leads.',
  lead: 'Only a lead of this campaign may do this. Ask one of them to do it, or to make you a lead.',
}

declare const proof: unique symbol

interface PermitWith<out Proofs> {
  readonly [proof]: Proofs
  readonly viewer: Viewer
  readonly campaign: Campaign
  readonly role: Role
}

/** A permit to lead serves where one to grade or to read is asked for. */
export type CampaignPermit<C extends Capability> = PermitWith<Included[C]>

export interface SitePermit {
  readonly [proof]: { site: true }
  readonly viewer: Viewer
}

/** @throws Problem 401 signed out, 404 not a member (or no such campaign: the two answer alike), 403 role too small. */
export async function permitCampaign<C extends Capability>(
  db: Kysely<DB>,
  viewer: Viewer | null,
  slug: string,
  capability: C,
): Promise<CampaignPermit<C>> {
  if (!viewer) throw signInNeeded()
  const found = await findCampaignMembership(db, slug, viewer.id)
  if (!found) throw notFound('campaign')
  if (!GRANTS[found.role].includes(capability)) throw forbidden(NEEDS[capability])
  return { viewer, campaign: found.campaign, role: found.role } as CampaignPermit<C>
}

/** @throws Problem 401 signed out, 403 not an administrator. */
export function permitSite(viewer: Viewer | null): SitePermit {
  if (!viewer) throw signInNeeded()
  if (!viewer.isAdmin) throw forbidden('Only an administrator of this site may do this.')
  return { viewer } as SitePermit
}

export function roleMay(role: Role, capability: Capability): boolean {
  return GRANTS[role].includes(capability)
}
