import 'server-only'
import { createHash } from 'node:crypto'
import type { Kysely } from 'kysely'
import { insertRecipe, requireRecipe } from '@/db/queries/campaigns'
import { findRecipe } from '@/db/queries/recipes'
import type { DB } from '@/db/schema'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import { conflict, notFound } from '@/lib/platform/problems/problem'
import { canonicalRecipe, type Recipe } from '@/lib/science/imaging/recipe'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { requestImaging } from './commit-outcomes'
import { raised } from './raise-recipes'

export interface ChangedRecipe {
  version: number
  hash: string
}

/**
 * Appends a version and asks for pictures by it. Old pictures are shown until the new ones are there, and every grade remembers
 * the version it was given on.
 * @param after the version that was changed.
 * @throws Problem 409 `recipe-outdated` (somebody was quicker), `recipe-unchanged`.
 */
export async function changeRecipe(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  { recipe, after }: { recipe: Recipe; after: number },
): Promise<ChangedRecipe> {
  return append(db, permit, canonicalRecipe(raised(recipe)), after)
}

/** Appends an earlier version as a new one, drawn as pictures are drawn now. @throws Problem 404 no such version; 409 as changeRecipe. */
export async function takeRecipeAgain(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  { again, after }: { again: number; after: number },
): Promise<ChangedRecipe> {
  const earlier = await findRecipe(db, permit.campaign.id, again)
  if (!earlier) throw notFound('version of the recipe')
  return append(db, permit, canonicalRecipe(raised(JSON.parse(earlier.parameters) as Recipe)), after, again)
}

async function append(
  db: Kysely<DB>,
  { campaign, viewer }: CampaignPermit<'lead'>,
  parameters: string,
  after: number,
  again?: number,
): Promise<ChangedRecipe> {
  const hash = createHash('sha256').update(parameters).digest('hex')
  return db.transaction().execute(async (transaction) => {
    const before = await requireRecipe(transaction, campaign.id)
    if (before.version !== after) {
      throw conflict(
        'recipe-outdated',
        `Version ${before.version} was saved meanwhile, and yours began from version ${after}. Nothing was saved; load the page again to see it.`,
      )
    }
    if (before.parameters === parameters) {
      throw conflict('recipe-unchanged', `This is the recipe in force already (version ${before.version}).`)
    }
    const version = before.version + 1
    const campaignId = campaign.id
    await insertRecipe(transaction, { campaignId, version, parameters, hash, createdBy: viewer.id, now: isoTime() })
    await requestImaging(transaction, campaignId)
    await recordEvent(transaction, {
      personId: viewer.id,
      campaignId,
      action: 'stamps.recipe-changed',
      subject: String(version),
      detail: again === undefined ? { hash } : { hash, again },
    })
    return { version, hash }
  })
}
