import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { permitCampaign } from '@/lib/work/people/permission'
import { findSamples } from '@/lib/work/stamps/preview-recipe'

/**
 * GET /api/campaigns/{slug}/recipes/samples?count=4: candidates to try a recipe on, drawn by lot; with `name=…` those whose
 * name contains it. Leads. `{ candidates: [{ id, name }] }`
 */
export const GET = route({
  params: z.strictObject({ slug: z.string() }),
  query: z.strictObject({
    name: z
      .string()
      .trim()
      .max(200, 'At most 200 characters of a name.')
      .transform((text) => text || null)
      .default(null),
    count: z.coerce
      .number('The count is a whole number.')
      .int('The count is a whole number.')
      .min(1, 'The count is at least 1.')
      .max(20, 'The count is at most 20.')
      .default(4),
  }),
  handler: async ({ db, viewer, params, query }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'lead')
    const candidates = await findSamples(db, permit, query)
    return Response.json({ candidates }, { headers: { 'cache-control': 'private, no-store' } })
  },
})
