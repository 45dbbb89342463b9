import { z } from 'zod'
import { fileResponse } from '@/app/api/_lib/file-response'
import { route } from '@/app/api/_lib/route'
import { exportCatalogue } from '@/lib/work/catalogue/export-catalogue'
import { permitCampaign } from '@/lib/work/people/permission'

/** GET /api/campaigns/{slug}/catalogue.vot: the catalogue as it stands, streamed. Leads and viewers; graders get a 403. */
export const GET = route({
  params: z.strictObject({ slug: z.string() }),
  handler: async ({ db, viewer, params }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'read')
    return fileResponse(await exportCatalogue(db, permit, 'vot'))
  },
})
