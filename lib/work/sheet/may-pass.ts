import 'server-only'
import type { Kysely } from 'kysely'
import { isPasser } from '@/db/queries/sheet'
import type { DB } from '@/db/schema'
import { conflict, forbidden } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'

/** Leads make the first pass by their role, graders where a lead has picked them. */
export async function mayPass(db: Kysely<DB>, { campaign, viewer, role }: CampaignPermit<'read'>): Promise<boolean> {
  if (role === 'viewer') return false
  return role === 'lead' || (await isPasser(db, campaign.id, viewer.id))
}

/** @throws Problem 403 not picked for the first pass. */
export async function assertPasses(db: Kysely<DB>, permit: CampaignPermit<'grade'>): Promise<void> {
  if (await mayPass(db, permit)) return
  throw forbidden('The first pass is made by people whom a lead has picked for it. Ask one of the leads.')
}

/** @throws Problem 409 `sheet-off` */
export function assertUsesSheet({ campaign }: CampaignPermit<'read'>): void {
  if (campaign.uses_sheet === 1) return
  throw conflict('sheet-off', 'This campaign makes no first pass: everything goes to the bench. A lead can turn it on.')
}
