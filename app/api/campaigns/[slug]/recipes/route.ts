import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { fromJson } from '@/db/schema/values'
import { permitCampaign } from '@/lib/work/people/permission'
import { changeRecipe, takeRecipeAgain } from '@/lib/work/stamps/change-recipe'
import { recipeInput } from '@/lib/work/stamps/recipe-input'
import { listRecipeVersions, recipeProgress } from '@/lib/work/stamps/recipe-versions'

const params = z.strictObject({ slug: z.string() })
const version = z
  .number('A version is a whole number.')
  .int('A version is a whole number.')
  .min(1, 'Versions count from 1.')

/** GET /api/campaigns/{slug}/recipes: every version, newest first, and how far the pictures have followed. Leads. */
export const GET = route({
  params,
  handler: async ({ db, viewer, params: { slug } }) => {
    const permit = await permitCampaign(db, viewer, slug, 'lead')
    const answer = { progress: await recipeProgress(db, permit), versions: await listRecipeVersions(db, permit) }
    return Response.json(answer, { headers: { 'cache-control': 'private, no-store' } })
  },
})

/**
 * POST /api/campaigns/{slug}/recipes: `{ after: 3, recipe: {…} }` appends a version that began from version 3,
 * `{ after: 3, again: 1 }` appends version 1 once more. Leads. Answers 201 `{ version, hash }`; pictures follow as a job.
 */
export const POST = route({
  params,
  body: z
    .strictObject({ after: version, again: version.optional(), recipe: z.unknown().optional() })
    .refine(({ again, recipe }) => (again === undefined) !== (recipe === undefined), {
      path: ['recipe'],
      message: 'Send either a recipe or, in "again", the version to take again.',
    }),
  handler: async ({ db, viewer, params: { slug }, body }) => {
    const permit = await permitCampaign(db, viewer, slug, 'lead')
    const { after, again } = body
    const changed =
      again === undefined
        ? await changeRecipe(db, permit, {
            after,
            recipe: recipeInput(fromJson(permit.campaign.bands)).parse(body.recipe),
          })
        : await takeRecipeAgain(db, permit, { after, again })
    return Response.json(changed, { status: 201 })
  },
})
