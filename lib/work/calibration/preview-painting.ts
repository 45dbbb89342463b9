import 'server-only'
import type { Kysely } from 'kysely'
import { requireRecipe } from '@/db/queries/campaigns'
import { listGalaxiesById } from '@/db/queries/calibration'
import { listHeldPlanes } from '@/db/queries/cutouts'
import type { DB } from '@/db/schema'
import { fromJson } from '@/db/schema/values'
import { notFound } from '@/lib/platform/problems/problem'
import type { BlobStore } from '@/lib/platform/storage/blob-store'
import type { PaintingTruth } from '@/lib/science/lensing/painting/paint-lens'
import type { Recipe } from '@/lib/science/imaging/recipe'
import { groupBy } from '@/lib/work/intake/group-by'
import type { CampaignPermit } from '@/lib/work/people/permission'
import type { PaintRunner } from '@/lib/work/stamps/paint-task'
import { heldPlane } from '@/lib/work/stamps/plan-imaging'
import { explainPainting } from './explain-painting'
import type { PreviewInput } from './painting-input'

export interface PaintedSample {
  id: number
  /** Of the galaxy. */
  name: string
  /** As data addresses: nothing of a preview is stored. */
  views: { key: string; url: string; width: number; height: number }[]
  explanation: string | null
  truth: PaintingTruth | null
  /** Why this galaxy cannot be painted over. */
  fault: string | null
}

/** The views that show an arc best. */
const SHOWN = ['colour', 'residual', 'deep']

/** @throws Problem 404 where a galaxy cannot be used in this campaign. */
export async function previewPainting(
  db: Kysely<DB>,
  { campaign }: CampaignPermit<'lead'>,
  tools: { runner: PaintRunner; blobs: BlobStore },
  { ranges, galaxies, seed }: PreviewInput,
): Promise<PaintedSample[]> {
  const found = await listGalaxiesById(db, campaign.id, galaxies)
  if (found.length < galaxies.length) throw notFound('candidate')
  const bands = fromJson(campaign.bands)
  const recipe = JSON.parse((await requireRecipe(db, campaign.id)).parameters) as Recipe
  const names = found.map(({ name }) => name)
  const held = groupBy(await listHeldPlanes(db, campaign.id, names), ({ candidate }) => candidate)
  return Promise.all(
    galaxies.map(async (id, index) => {
      const galaxy = found.find((one) => one.id === id)!
      const rows = (held.get(galaxy.name) ?? []).sort((a, b) => bands.indexOf(a.band) - bands.indexOf(b.band))
      const made = await tools.runner.paint({
        planes: rows.map((row) => heldPlane(tools, row)),
        pixelScaleArcsec: galaxy.pixelScaleArcsec,
        ranges,
        seed: seed + 7919 * index,
        name: null,
        position: null,
        recipe: { ...recipe, views: shownViews(recipe) },
      })
      const { name } = galaxy
      if ('fault' in made) return { id, name, views: [], explanation: null, truth: null, fault: made.fault }
      const views = made.views.map(({ key, width, height, png }) => ({
        key,
        width,
        height,
        url: `data:image/png;base64,${Buffer.from(png).toString('base64')}`,
      }))
      const { truth } = made
      return { id, name, views, explanation: truth && explainPainting(truth), truth, fault: null }
    }),
  )
}

const shownViews = ({ views }: Recipe): Recipe['views'] => {
  const known = SHOWN.filter((key) => views.includes(key))
  return known.length > 0 ? known : views.slice(0, 2)
}
