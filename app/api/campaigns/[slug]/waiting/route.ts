import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { waitingFor } from '@/lib/work/discussion/list-mentions'
import { permitCampaign } from '@/lib/work/people/permission'

/** GET: how many looks are asked of this person, and how many mentions they have not read. Members. */
export const GET = route({
  params: z.strictObject({ slug: z.string() }),
  handler: async ({ db, viewer, params }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'read')
    return Response.json(await waitingFor(db, permit), { headers: { 'cache-control': 'private, no-store' } })
  },
})
