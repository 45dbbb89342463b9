import 'server-only'
import type { Kysely } from 'kysely'
import { requireRecipe } from '@/db/queries/campaigns'
import { listRecipesById } from '@/db/queries/recipes'
import { findCampaignById } from '@/db/queries/stamps'
import type { DB } from '@/db/schema'
import { fromJson } from '@/db/schema/values'
import type { BlobStore } from '@/lib/platform/storage/blob-store'
import type { Recipe } from '@/lib/science/imaging/recipe'
import { nameMatcher, type NameMatcher } from '@/lib/work/intake/name-pattern'
import type { ImageRunner } from './worker-tasks'

/** What the jobs stand on; tests and the benchmark bring their own. */
export interface ImagingTools {
  db: Kysely<DB>
  blobs: BlobStore
  stampFolder: string
  runner: ImageRunner
  /** Threads that work at once. */
  workers: number
  /** How long after the last delivery an incomplete candidate waits for its other bands. */
  quietMs: number
  /** How many waiting files are looked at in one go; 3,000 where it is left out. */
  filesPerPage?: number
}

/** A campaign's settings as they are while a job runs. */
export interface CampaignWork {
  campaignId: number
  bands: string[]
  matcher: NameMatcher
  recipeId: number
  recipe: Recipe
}

/** @param recipeId of the campaign; left out: the one in force. */
export async function campaignWork(db: Kysely<DB>, campaignId: number, recipeId?: number): Promise<CampaignWork> {
  const campaign = await findCampaignById(db, campaignId)
  if (!campaign) throw new Error(`There is no campaign ${campaignId}`)
  const [asked] = recipeId === undefined ? [] : await listRecipesById(db, [recipeId])
  if (recipeId !== undefined && asked?.campaign_id !== campaignId) {
    throw new Error(`Recipe ${recipeId} is not of campaign ${campaignId}`)
  }
  const recipe = asked ?? (await requireRecipe(db, campaignId))
  const bands = fromJson(campaign.bands)
  return {
    campaignId,
    bands,
    matcher: nameMatcher(campaign.name_pattern, bands),
    recipeId: recipe.id,
    recipe: JSON.parse(recipe.parameters) as Recipe,
  }
}
