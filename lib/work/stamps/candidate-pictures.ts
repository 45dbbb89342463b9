import 'server-only'
import type { Kysely } from 'kysely'
import { requireRecipe } from '@/db/queries/campaigns'
import { listPlaneGeometries, listStamps, type PlaneGeometry, type StampOfCandidate } from '@/db/queries/stamps'
import type { DB } from '@/db/schema'
import type { Campaign } from '@/db/schema/campaigns'
import { fromJson } from '@/db/schema/values'
import { viewsOf, type Recipe } from '@/lib/science/imaging/recipe'
import type { StampGeometry } from '@/lib/science/imaging/stamp-geometry'
import { candidateGeometry } from './candidate-geometry'
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
}

export interface CandidatePictures {
  views: PictureView[]
  geometry: StampGeometry
  /** Address of the pixels for live contrast; null without any. */
  planesUrl: string | null
}

/** The address of a stamp. Its name is its hash, so it may be kept for ever. */
export const stampUrl = (slug: string, sha256: string): string => `/api/campaigns/${slug}/stamps/${sha256}`

/**
 * The pictures of each of these candidates, every view of the recipe in force in its order, by candidate. The caller holds a
 * permit for the campaign; candidates of another campaign and unknown ones get views without pictures.
 */
export async function picturesOf(
  db: Kysely<DB>,
  campaign: Campaign,
  candidateIds: number[],
): Promise<Map<number, CandidatePictures>> {
  const { parameters, hash } = await requireRecipe(db, campaign.id)
  const recipe = JSON.parse(parameters) as Recipe
  const bands = fromJson(campaign.bands)
  const stamps = groupByCandidate(await listStamps(db, campaign.id, candidateIds))
  const planes = groupByCandidate(await listPlaneGeometries(db, campaign.id, candidateIds))
  const names = viewsOf(recipe, bands)
  const place = (plane: PlaneGeometry) => bands.indexOf(plane.band)
  return new Map(
    candidateIds.map((id) => {
      const made = newestOf(stamps.get(id) ?? [])
      const views = names.map(({ key, label }) => pictureView(campaign.slug, key, label, made.get(key)))
      const ordered = (planes.get(id) ?? []).toSorted((a, b) => place(a) - place(b))
      const planesUrl = ordered.length > 0 ? planesUrlOf(campaign.slug, id, ordered, hash) : null
      return [id, { views, geometry: candidateGeometry(ordered), planesUrl }]
    }),
  )
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

/** Views of one recipe only, the newest that was made: pictures of two recipes side by side would not compare. */
function newestOf(stamps: readonly StampOfCandidate[]): Map<string, StampOfCandidate> {
  const newest = stamps[0]?.recipeId
  return new Map(stamps.filter(({ recipeId }) => recipeId === newest).map((stamp) => [stamp.view, stamp]))
}

function pictureView(slug: string, key: string, label: string, stamp: StampOfCandidate | undefined): PictureView {
  if (!stamp) return { key, label, url: null, width: 0, height: 0, note: null }
  return { key, label, url: stampUrl(slug, stamp.sha256), width: stamp.width, height: stamp.height, note: stamp.note }
}
