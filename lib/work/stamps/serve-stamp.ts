import 'server-only'
import type { Kysely } from 'kysely'
import { findOriginOfStamp } from '@/db/queries/stamps'
import type { DB } from '@/db/schema'
import { notFound, Problem } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { requestImaging } from './commit-outcomes'
import { readStamp } from './stamp-store'

/**
 * The bytes of a stamp of this campaign. One that is missing on disk or damaged is made again
 * from its cutouts by the recipe that it was made by.
 * @throws Problem 404: not a stamp of this campaign (whatever other campaigns have), or being made again.
 */
export async function serveStamp(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  folder: string,
  sha256: string,
): Promise<Uint8Array<ArrayBuffer>> {
  const origin = await findOriginOfStamp(db, permit.campaign.id, sha256)
  if (origin === null) throw notFound('stamp')
  const bytes = await readStamp(folder, sha256)
  if (bytes) return bytes
  await requestImaging(db, permit.campaign.id, [origin.candidateId], origin.recipeId)
  throw new Problem(404, 'stamp-lost', 'This picture is being made again. Try again in a few seconds.')
}
