import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { practiceState } from '@/lib/work/calibration/practice'
import { permitCampaign } from '@/lib/work/people/permission'

/** GET: the stamp that practice shows this person now, without its truth, and their own results. Graders and leads. */
export const GET = route({
  params: z.object({ slug: z.string() }),
  handler: async ({ db, viewer, params }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'grade')
    return Response.json(await practiceState(db, permit), { headers: { 'cache-control': 'private, no-store' } })
  },
})
