import 'server-only'
import type { Kysely } from 'kysely'
import { requireRecipe } from '@/db/queries/campaigns'
import { countUnfinishedJobs } from '@/db/queries/jobs'
import { countImagedBy, listRecipes } from '@/db/queries/recipes'
import type { DB } from '@/db/schema'
import type { IsoTime } from '@/db/schema/values'
import { JOB } from '@/lib/platform/jobs/job-kinds'
import type { Recipe } from '@/lib/science/imaging/recipe'
import type { CampaignPermit } from '@/lib/work/people/permission'

export interface RecipeVersion {
  version: number
  /** SHA-256 of the canonical JSON: equal hashes are equal recipes. */
  hash: string
  author: string
  createdAt: IsoTime
  recipe: Recipe
}

/** Every version, newest (the one in force) first. */
export async function listRecipeVersions(db: Kysely<DB>, permit: CampaignPermit<'lead'>): Promise<RecipeVersion[]> {
  const rows = await listRecipes(db, permit.campaign.id)
  return rows.map(({ version, hash, author, created_at, parameters }) => ({
    version,
    hash,
    author,
    createdAt: created_at,
    recipe: JSON.parse(parameters) as Recipe,
  }))
}

/** How far the pictures have followed the recipe. */
export interface RecipeProgress {
  /** In force. */
  version: number
  /** Candidates with cutouts, and how many of them have their pictures by this version. */
  candidates: number
  imaged: number
  /** Whether work on pictures waits or goes on. */
  working: boolean
}

export async function recipeProgress(db: Kysely<DB>, permit: CampaignPermit<'lead'>): Promise<RecipeProgress> {
  const { id } = permit.campaign
  const recipe = await requireRecipe(db, id)
  const jobs = await countUnfinishedJobs(db, id, JOB.imageCandidates)
  return { version: recipe.version, working: jobs > 0, ...(await countImagedBy(db, id, recipe.id)) }
}
