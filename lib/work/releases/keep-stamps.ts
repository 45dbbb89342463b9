import 'server-only'
import type { Kysely } from 'kysely'
import { listFrozen, listStampsToRelease } from '@/db/queries/release-making'
import type { ReleaseRow } from '@/db/queries/releases'
import type { DB } from '@/db/schema'
import { giveWay } from '@/lib/platform/jobs/give-way'
import type { BlobStore } from '@/lib/platform/storage/blob-store'
import { requestImaging } from '@/lib/work/stamps/commit-outcomes'
import { readStamp } from '@/lib/work/stamps/stamp-store'
import { PAGE, releaseBounds } from './read-frozen'

/**
 * Copies the pictures of all entries among the blobs, since stamps can be made again and are not kept for good. Those that are missing
 * are asked for all at once, each by the recipe that it had. `onKept` hears where some were copied, so that a try that got on does not
 * count against the job.
 * @throws Error with a sentence while some are missing.
 */
export async function keepStamps(
  { db, blobs, stampFolder }: { db: Kysely<DB>; blobs: BlobStore; stampFolder: string },
  release: ReleaseRow,
  onKept: () => Promise<void>,
): Promise<void> {
  const { campaign_id: campaignId, recipe_hash: recipeHash } = release
  const missing = new Map<number, Set<number>>()
  let kept = 0
  let lacking = 0
  for (let after = 0; ; await giveWay()) {
    const page = await listFrozen(db, releaseBounds(release), { after, limit: PAGE, confirmed: true })
    if (page.length === 0) break
    const ids = page.map((row) => row.candidate_id)
    after = ids[ids.length - 1]
    for (const { candidateId, recipeId, sha256 } of await listStampsToRelease(db, { campaignId, recipeHash }, ids)) {
      if (await blobs.has(sha256)) continue
      const bytes = await readStamp(stampFolder, sha256)
      if (bytes) {
        await blobs.put(bytes)
        kept += 1
      } else {
        lacking += 1
        missing.set(recipeId, (missing.get(recipeId) ?? new Set()).add(candidateId))
      }
    }
  }
  if (kept > 0) await onKept()
  if (lacking === 0) return
  for (const [recipeId, ids] of missing) await requestImaging(db, campaignId, [...ids], recipeId)
  const [pictures, are] = lacking === 1 ? ['1 picture was', 'is'] : [`${lacking} pictures were`, 'are']
  throw new Error(`${pictures} missing and ${are} being made again. The release goes on by itself in a moment.`)
}
