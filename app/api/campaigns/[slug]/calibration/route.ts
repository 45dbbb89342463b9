import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { calibrationPage } from '@/lib/work/calibration/calibration-page'
import { orderPainting } from '@/lib/work/calibration/order-painting'
import { OrderInput } from '@/lib/work/calibration/painting-input'
import { permitCampaign } from '@/lib/work/people/permission'

const params = z.strictObject({ slug: z.string() })

/** GET: the campaign's calibration stamps with their truth, and how far the making of more is. Leads. */
export const GET = route({
  params,
  handler: async ({ db, viewer, params }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'lead')
    return Response.json(await calibrationPage(db, permit), { headers: { 'cache-control': 'private, no-store' } })
  },
})

/** POST: has calibration stamps made in the background. Leads. */
export const POST = route({
  params,
  body: OrderInput,
  handler: async ({ db, viewer, params, body }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'lead')
    return Response.json(await orderPainting(db, permit, body), { status: 202 })
  },
})
