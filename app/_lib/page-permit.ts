import 'server-only'
import type { Kysely } from 'kysely'
import { notFound } from 'next/navigation'
import { cache } from 'react'
import type { DB } from '@/db/schema'
import { database } from '@/lib/platform/database'
import { Problem } from '@/lib/platform/problems/problem'
import { permitCampaign, type Capability, type CampaignPermit } from '@/lib/work/people/permission'
import { requireViewer } from '@/lib/work/people/session'

/**
 * For pages of a campaign: a signed-out visitor goes to sign in and comes back; whoever may not see it gets the not-found
 * page, which says both reasons. Cached, so that layout and page ask once.
 */
export const permitPage = cache(
  async <C extends Capability>(
    slug: string,
    capability: C,
    path = '',
  ): Promise<{ db: Kysely<DB>; permit: CampaignPermit<C> }> => {
    const viewer = await requireViewer(`/campaigns/${slug}${path}`)
    const db = await database()
    try {
      return { db, permit: await permitCampaign(db, viewer, slug, capability) }
    } catch (error) {
      if (error instanceof Problem && (error.status === 404 || error.status === 403)) notFound()
      throw error
    }
  },
)
