import 'server-only'
import type { Kysely } from 'kysely'
import { requireRecipe } from '@/db/queries/campaigns'
import { listPlaneSources } from '@/db/queries/cutouts'
import type { DB } from '@/db/schema'
import { fromJson } from '@/db/schema/values'
import { notFound, Problem } from '@/lib/platform/problems/problem'
import type { BlobStore } from '@/lib/platform/storage/blob-store'
import type { Recipe } from '@/lib/science/imaging/recipe'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { planesHash } from './planes-hash'
import type { PlanesRunner } from './worker-tasks'

/**
 * Of all bands together. Two bytes a pixel, and with what the views need at most 2.5 times as many planes: 20 MiB before zipping.
 * A cutout of 1,000 by 1,000 pixels in four bands fits.
 */
export const MOST_PIXELS = 4 * 1024 * 1024

export interface ServedPlanes {
  hash: string
  /** Reads and codes the planes in a thread; gzipped. Not called when the asker has them already. */
  bytes: () => Promise<Uint8Array<ArrayBuffer>>
}

/**
 * The pixel planes of a candidate with the recipe in force, for live contrast. Any member may have them: they are the pictures,
 * and say nothing of grades, scores or truth.
 * @throws Problem 404: not a candidate of this campaign, without planes, or a file is lost. 413: too many pixels to send.
 */
export async function servePlanes(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  blobs: BlobStore,
  runner: PlanesRunner,
  candidateId: number,
): Promise<ServedPlanes> {
  const { campaign } = permit
  const rows = await listPlaneSources(db, campaign.id, candidateId)
  if (rows.length === 0) throw notFound('candidate with pixels')
  const pixels = rows.reduce((sum, { width, height }) => sum + width * height, 0)
  if (pixels > MOST_PIXELS) {
    const million = (count: number) => (count / 1e6).toFixed(1)
    throw new Problem(
      413,
      'planes-too-large',
      `These cutouts have ${million(pixels)} million pixels; live contrast takes up to ${million(MOST_PIXELS)}. Its pictures stay as the recipe makes them.`,
    )
  }
  const recipe = await requireRecipe(db, campaign.id)
  const bands = fromJson(campaign.bands)
  const sources = rows.toSorted((a, b) => bands.indexOf(a.band) - bands.indexOf(b.band))
  return {
    hash: planesHash(sources, recipe.hash),
    bytes: async () => {
      const made = await runner.planes({
        recipe: JSON.parse(recipe.parameters) as Recipe,
        planes: sources.map(({ band, hdu, planeIndex, fileId, fileName, sha256 }) => ({
          band,
          hdu,
          planeIndex,
          file: { id: fileId, name: fileName, sha256, path: blobs.pathOf(sha256) },
        })),
      })
      if ('lost' in made) {
        throw new Problem(
          404,
          'file-lost',
          `${made.lost} can no longer be read on the server. Send it again under the same name.`,
        )
      }
      return made.bytes
    },
  }
}
