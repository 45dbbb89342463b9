import 'server-only'
import type { Kysely } from 'kysely'
import { findCampaignById } from '@/db/queries/stamps'
import type { ReleaseRow } from '@/db/queries/releases'
import type { DB } from '@/db/schema'
import type { ReleaseEntry } from '@/db/schema/releases'
import { fromJson } from '@/db/schema/values'
import type { StampGeometry } from '@/lib/science/imaging/stamp-geometry'
import { picturesOf, stampUrl } from '@/lib/work/stamps/candidate-pictures'

/** How a released picture lies on the sky. */
export interface ReleasedGeometry {
  width: number
  height: number
  geometry: StampGeometry
}

/**
 * By view. Only of pictures that are the same to the last byte as those that the campaign has now, whose geometry is known: a release
 * keeps bytes, and of others nobody can tell any more.
 */
export async function releasedGeometries(
  db: Kysely<DB>,
  release: Pick<ReleaseRow, 'campaign_id' | 'slug'>,
  entry: Pick<ReleaseEntry, 'candidate_id' | 'stamps'>,
): Promise<Record<string, ReleasedGeometry>> {
  const campaign = await findCampaignById(db, release.campaign_id)
  if (!campaign) return {}
  const released = fromJson(entry.stamps)
  const pictures = (await picturesOf(db, campaign, [entry.candidate_id])).get(entry.candidate_id)
  const isSame = ({ key, url }: { key: string; url: string | null }) =>
    released[key] !== undefined && url === stampUrl(campaign.slug, released[key])
  const same = (pictures?.views ?? []).filter(isSame)
  return Object.fromEntries(same.map(({ key, width, height, geometry }) => [key, { width, height, geometry }]))
}
