import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { BatchControl, controlBatch } from '@/lib/work/intake/control-batch'
import { permitCampaign } from '@/lib/work/people/permission'

/**
 * POST /api/campaigns/{slug}/batches/{id} `{"reading":"pause"|"go on"|"cancel"}`: leads. Cancelling refuses what is not read yet
 * and answers `{ cancelled: count }`.
 */
export const POST = route({
  params: z.strictObject({ slug: z.string(), id: z.coerce.number().int().positive() }),
  body: BatchControl,
  handler: async ({ db, viewer, params, body }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'lead')
    return Response.json(await controlBatch(db, permit, params.id, body))
  },
})
