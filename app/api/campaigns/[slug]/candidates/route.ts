import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { listCandidates } from '@/lib/work/catalogue/list-candidates'
import { permitCampaign } from '@/lib/work/people/permission'

/**
 * GET /api/campaigns/{slug}/candidates?limit=100&state=split&cursor=…
 * Members of the campaign. `{ candidates: […], nextCursor }` in the order of ids; nextCursor is null on the last page. What a
 * grader has not judged yet has state and verdict null and `withheld` true. Score and calibration are told to leads only.
 */
export const GET = route({
  params: z.strictObject({ slug: z.string() }),
  query: z.strictObject({
    limit: z.coerce
      .number('The limit is a whole number.')
      .int('The limit is a whole number.')
      .min(1, 'The limit is at least 1.')
      .max(500, 'The limit is at most 500.')
      .default(100),
    cursor: z.string().optional(),
    state: z
      .enum(['open', 'split', 'confirmed', 'set aside'], 'A state is one of open, split, confirmed, set aside.')
      .optional(),
  }),
  handler: async ({ db, viewer, params, query }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'read')
    const page = await listCandidates(db, permit, query)
    return Response.json(page, { headers: { 'cache-control': 'private, no-store' } })
  },
})
