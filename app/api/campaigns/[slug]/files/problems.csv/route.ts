import { z } from 'zod'
import { fileResponse } from '@/app/api/_lib/file-response'
import { route } from '@/app/api/_lib/route'
import { exportProblems } from '@/lib/work/intake/export-problems'
import { permitCampaign } from '@/lib/work/people/permission'

/** A manifest may be called problems.csv: it is delivered as any other. */
export { PUT } from '../[...name]/route'

/** GET /api/campaigns/{slug}/files/problems.csv: every problem of files in force, streamed. Leads. */
export const GET = route({
  params: z.strictObject({ slug: z.string() }),
  handler: async ({ db, viewer, params }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'lead')
    return fileResponse(await exportProblems(db, permit))
  },
})
