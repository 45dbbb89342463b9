/** GET /api/campaigns/{slug}/counts: how many candidates are in which state, for the places beside the page. Members; not graders. */
import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { forbidden } from '@/lib/platform/problems/problem'
import { campaignCounts } from '@/lib/work/campaigns/campaign-counts'
import { permitCampaign } from '@/lib/work/people/permission'

export const GET = route({
  params: z.strictObject({ slug: z.string() }),
  handler: async ({ db, viewer, params }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'read')
    if (permit.role === 'grader') {
      throw forbidden('Graders see no counts of states: they would tell of candidates that are still to be graded.')
    }
    return Response.json(await campaignCounts(db, permit), { headers: { 'cache-control': 'private, no-store' } })
  },
})
