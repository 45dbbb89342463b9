import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { fromJson } from '@/db/schema/values'
import { blobs } from '@/lib/platform/storage/blobs'
import { permitCampaign } from '@/lib/work/people/permission'
import { imagePool } from '@/lib/work/stamps/image-pool'
import { MOST_SAMPLES, previewRecipe } from '@/lib/work/stamps/preview-recipe'
import { recipeInput } from '@/lib/work/stamps/recipe-input'

/**
 * POST /api/campaigns/{slug}/recipes/preview `{ recipe: {…}, candidates: [7, 19] }`: what these candidates would look like,
 * each view as a data address. Leads. Nothing is stored.
 */
export const POST = route({
  params: z.strictObject({ slug: z.string() }),
  body: z.strictObject({
    recipe: z.unknown(),
    candidates: z
      .array(z.number('A candidate is named by its number.').int().positive())
      .min(1, 'Name at least one candidate.')
      .max(MOST_SAMPLES, `At most ${MOST_SAMPLES} candidates at once.`),
  }),
  handler: async ({ db, viewer, params, body }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'lead')
    const recipe = recipeInput(fromJson(permit.campaign.bands)).parse(body.recipe)
    const tools = { runner: imagePool, blobs: blobs() }
    const samples = await previewRecipe(db, permit, tools, { recipe, candidateIds: body.candidates })
    return Response.json({ samples }, { headers: { 'cache-control': 'private, no-store' } })
  },
})
