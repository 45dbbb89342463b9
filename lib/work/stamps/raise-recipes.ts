import 'server-only'
import { createHash } from 'node:crypto'
import type { Kysely } from 'kysely'
import { insertRecipe, requireRecipe } from '@/db/queries/campaigns'
import { listCampaignsDrawnBefore } from '@/db/queries/recipes'
import type { DB } from '@/db/schema'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import { canonicalRecipe, DRAWING, type Recipe } from '@/lib/science/imaging/recipe'
import { requestImaging } from './commit-outcomes'

/** The recipe as pictures are drawn now. */
export const raised = (recipe: Recipe): Recipe => ({ ...recipe, version: DRAWING })

/**
 * Where a campaign's recipe in force is of an earlier drawing, appends it as a version of today's and asks for pictures by it: so
 * pictures change by a job that is seen, and each grade goes on telling by which version's picture it was given. The server does it
 * at its start; done again it changes nothing. In the name of whoever made the recipe, since a row needs a person; the audit has nobody.
 * @returns how many campaigns.
 */
export async function raiseRecipes(db: Kysely<DB>): Promise<number> {
  const campaigns = await listCampaignsDrawnBefore(db, DRAWING)
  let raisedCount = 0
  for (const campaignId of campaigns) if (await raiseRecipe(db, campaignId)) raisedCount++
  return raisedCount
}

function raiseRecipe(db: Kysely<DB>, campaignId: number): Promise<boolean> {
  return db.transaction().execute(async (transaction) => {
    const before = await requireRecipe(transaction, campaignId)
    const recipe = JSON.parse(before.parameters) as Recipe
    // Another server may have been quicker.
    if (recipe.version >= DRAWING) return false
    const parameters = canonicalRecipe(raised(recipe))
    const hash = createHash('sha256').update(parameters).digest('hex')
    const version = before.version + 1
    await insertRecipe(transaction, {
      campaignId,
      version,
      parameters,
      hash,
      createdBy: before.created_by,
      now: isoTime(),
    })
    await requestImaging(transaction, campaignId)
    await recordEvent(transaction, {
      personId: null,
      campaignId,
      action: 'stamps.recipe-raised',
      subject: String(version),
      detail: { hash, drawing: DRAWING },
    })
    return true
  })
}
