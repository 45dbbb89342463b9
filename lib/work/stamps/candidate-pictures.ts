import 'server-only'
import type { Kysely } from 'kysely'
import { requireRecipe } from '@/db/queries/campaigns'
import { listRecipesById } from '@/db/queries/recipes'
import { listPlaneGeometries, listStamps, type PlaneGeometry, type StampOfCandidate } from '@/db/queries/stamps'
import type { DB } from '@/db/schema'
import type { Campaign, RecipeRow } from '@/db/schema/campaigns'
import { fromJson } from '@/db/schema/values'
import { closeFieldOf, viewsOf, type Recipe } from '@/lib/science/imaging/recipe'
import type { StampGeometry } from '@/lib/science/imaging/stamp-geometry'
import { candidateGeometry, viewGeometry } from './candidate-geometry'
import { planesHash, type PlaneSource } from './planes-hash'

export interface PictureView {
  /** As in the recipe: `colour`, `deep`, `band:g`. */
  key: string
  label: string
  /** null: this view has not been made, or cannot be made of this candidate's cutouts. */
  url: string | null
  width: number
  height: number
  /** What a person must know about this picture. */
  note: string | null
  /** Scale and compass of this view: bands may differ in scale. */
  geometry: StampGeometry
}

export interface CandidatePictures {
  views: PictureView[]
  /** Of all views together; no scale where they differ in it. */
  geometry: StampGeometry
  /** Version of the recipe that these pictures were made by; null before there are any. */
  recipe: number | null
  /** Side of the close field of view, arcsec. */
  closeFieldArcsec: number
  /** Address of the pixels for live contrast; null without any. */
  planesUrl: string | null
}

/** The address of a stamp. Its name is its hash, so it may be kept for ever. */
export const stampUrl = (slug: string, sha256: string): string => `/api/campaigns/${slug}/stamps/${sha256}`

/**
 * The pictures of each of these candidates by candidate: every view of the recipe they were made by, in its order, or of the
 * recipe in force where there are none yet. While a changed recipe is worked through, candidates that it has not reached keep
 * their pictures whole. The caller holds a permit for the campaign; candidates of another campaign and unknown ones get views
 * without pictures.
 */
export async function picturesOf(
  db: Kysely<DB>,
  campaign: Campaign,
  candidateIds: number[],
): Promise<Map<number, CandidatePictures>> {
  const inForce = await requireRecipe(db, campaign.id)
  const bands = fromJson(campaign.bands)
  const stamps = groupByCandidate(await listStamps(db, campaign.id, candidateIds))
  const planes = groupByCandidate(await listPlaneGeometries(db, campaign.id, candidateIds))
  const recipes = await recipesOf(db, inForce, [...stamps.values()])
  const place = (plane: PlaneGeometry) => bands.indexOf(plane.band)
  return new Map(
    candidateIds.map((id) => {
      const made = stamps.get(id) ?? []
      const ordered = (planes.get(id) ?? []).toSorted((a, b) => place(a) - place(b))
      const { recipe, version } = recipes.get(made[0]?.recipeId ?? inForce.id) ?? read(inForce)
      const northUp = recipe.northUp === true
      const views = viewsOf(recipe, bands).map(({ key, label }) => {
        const stamp = made.find(({ view }) => view === key)
        const size = { key, width: stamp?.width ?? 0, height: stamp?.height ?? 0 }
        const url = stamp ? stampUrl(campaign.slug, stamp.sha256) : null
        return { ...size, label, url, note: stamp?.note ?? null, geometry: viewGeometry(ordered, size, northUp) }
      })
      const planesUrl = ordered.length > 0 ? planesUrlOf(campaign.slug, id, ordered, inForce.hash) : null
      const geometry = candidateGeometry(ordered, northUp)
      const closeFieldArcsec = closeFieldOf(recipe)
      return [id, { views, geometry, recipe: made.length > 0 ? version : null, closeFieldArcsec, planesUrl }]
    }),
  )
}

const read = ({ parameters, version }: RecipeRow) => ({ recipe: JSON.parse(parameters) as Recipe, version })

/** The recipes that any of these stamps were made by and the one in force, by id. */
async function recipesOf(db: Kysely<DB>, inForce: RecipeRow, stamps: readonly StampOfCandidate[][]) {
  const others = new Set(stamps.flatMap(([first]) => (first ? first.recipeId : [])))
  others.delete(inForce.id)
  const rows = [inForce, ...(await listRecipesById(db, [...others]))]
  return new Map(rows.map((row) => [row.id, read(row)]))
}

/** Its name is in the address, so it may be kept for ever. */
const planesUrlOf = (slug: string, id: number, sources: PlaneSource[], recipeHash: string): string =>
  `/api/campaigns/${slug}/candidates/${id}/planes?v=${planesHash(sources, recipeHash)}`

function groupByCandidate<T extends { candidateId: number }>(rows: readonly T[]): Map<number, T[]> {
  const groups = new Map<number, T[]>()
  for (const row of rows) {
    const group = groups.get(row.candidateId)
    if (group) group.push(row)
    else groups.set(row.candidateId, [row])
  }
  return groups
}
