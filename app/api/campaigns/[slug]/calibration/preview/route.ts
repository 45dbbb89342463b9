import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { blobs } from '@/lib/platform/storage/blobs'
import { PreviewInput } from '@/lib/work/calibration/painting-input'
import { previewPainting } from '@/lib/work/calibration/preview-painting'
import { permitCampaign } from '@/lib/work/people/permission'
import { imagePool } from '@/lib/work/stamps/image-pool'

/** POST `{ ranges: {…}, galaxies: [7, 19], seed: 4 }`: lenses painted over these galaxies, each view as a data address. Leads. Nothing is stored. */
export const POST = route({
  params: z.strictObject({ slug: z.string() }),
  body: PreviewInput,
  handler: async ({ db, viewer, params, body }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'lead')
    const samples = await previewPainting(db, permit, { runner: imagePool, blobs: blobs() }, body)
    return Response.json({ samples }, { headers: { 'cache-control': 'private, no-store' } })
  },
})
