import 'server-only'
import type { Kysely } from 'kysely'
import { listHeldPlanes } from '@/db/queries/cutouts'
import { listSamples, type SampleRow } from '@/db/queries/recipes'
import { listCandidatesById, listPlaneGeometries } from '@/db/queries/stamps'
import type { DB } from '@/db/schema'
import { fromJson } from '@/db/schema/values'
import { notFound } from '@/lib/platform/problems/problem'
import type { BlobStore } from '@/lib/platform/storage/blob-store'
import { viewsOf, type Recipe } from '@/lib/science/imaging/recipe'
import { groupBy } from '@/lib/work/intake/group-by'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { viewGeometry } from './candidate-geometry'
import type { PictureView } from './candidate-pictures'
import { heldPlane } from './plan-imaging'
import type { PreviewRunner } from './worker-tasks'

export const MOST_SAMPLES = 6

export interface SamplePreview {
  id: number
  name: string
  /** Pictures as data addresses: nothing of a preview is stored. */
  views: PictureView[]
  /** Why there are none. */
  fault: string | null
}

/** Candidates to try a recipe on: any, drawn by lot, or those whose name contains a text. */
export async function findSamples(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  { name, count }: { name: string | null; count: number },
): Promise<SampleRow[]> {
  return listSamples(db, permit.campaign.id, { name, limit: Math.min(count, 20) })
}

/**
 * What these candidates would look like by a recipe. Nothing is stored.
 * @throws Problem 404 where one of them is not of this campaign.
 */
export async function previewRecipe(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  { runner, blobs }: { runner: PreviewRunner; blobs: BlobStore },
  { recipe, candidateIds }: { recipe: Recipe; candidateIds: number[] },
): Promise<SamplePreview[]> {
  const { campaign } = permit
  const bands = fromJson(campaign.bands)
  const place = ({ band }: { band: string }) => bands.indexOf(band)
  const ids = [...new Set(candidateIds)].slice(0, MOST_SAMPLES)
  const found = await listCandidatesById(db, campaign.id, ids)
  if (found.length < ids.length) throw notFound('candidate')
  const names = found.map(({ name }) => name)
  const held = groupBy(await listHeldPlanes(db, campaign.id, names), ({ candidate }) => candidate)
  const geometries = groupBy(await listPlaneGeometries(db, campaign.id, ids), ({ candidateId }) => String(candidateId))
  return Promise.all(
    ids.map(async (id) => {
      const name = found.find((candidate) => candidate.id === id)?.name ?? ''
      const planes = (held.get(name) ?? []).toSorted((a, b) => place(a) - place(b))
      const made = await runner.preview({ recipe, planes: planes.map((row) => heldPlane({ blobs }, row)) })
      if ('lost' in made) {
        const fault = `${made.lost} can no longer be read on the server. Send it again under the same name.`
        return { id, name, views: [], fault }
      }
      const lying = (geometries.get(String(id)) ?? []).toSorted((a, b) => place(a) - place(b))
      const views = viewsOf(recipe, bands).map(({ key, label }) => {
        const drawn = made.views.find((view) => view.key === key)
        const size = { key, width: drawn?.width ?? 0, height: drawn?.height ?? 0 }
        const url = drawn ? `data:image/png;base64,${Buffer.from(drawn.png).toString('base64')}` : null
        const geometry = viewGeometry(lying, size, recipe.northUp === true)
        return { ...size, label, url, note: drawn?.note ?? null, geometry }
      })
      return { id, name, views, fault: null }
    }),
  )
}
