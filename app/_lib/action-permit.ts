import 'server-only'
import type { Kysely } from 'kysely'
import type { DB } from '@/db/schema'
import { database } from '@/lib/platform/database'
import { permitCampaign, permitSite, type CampaignPermit, type SitePermit } from '@/lib/work/people/permission'
import { getViewer } from '@/lib/work/people/session'

/** For form actions that only a lead may take. @throws Problem, which `failedForm` turns into the form's message. */
export async function permitLead(slug: string): Promise<{ db: Kysely<DB>; permit: CampaignPermit<'lead'> }> {
  const db = await database()
  return { db, permit: await permitCampaign(db, await getViewer(), slug, 'lead') }
}

/** For form actions of leads and graders. @throws Problem, which `failedForm` turns into the form's message. */
export async function permitGrader(slug: string): Promise<{ db: Kysely<DB>; permit: CampaignPermit<'grade'> }> {
  const db = await database()
  return { db, permit: await permitCampaign(db, await getViewer(), slug, 'grade') }
}

/** For form actions of an administrator. @throws Problem */
export async function permitAdministrator(): Promise<{ db: Kysely<DB>; permit: SitePermit }> {
  const permit = permitSite(await getViewer())
  return { db: await database(), permit }
}

/** For form actions of every member. @throws Problem, which `failedForm` turns into the form's message. */
export async function permitReader(slug: string): Promise<{ db: Kysely<DB>; permit: CampaignPermit<'read'> }> {
  const db = await database()
  return { db, permit: await permitCampaign(db, await getViewer(), slug, 'read') }
}
