import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { FileListQuery, listDeliveredFiles } from '@/lib/work/intake/list-files'
import { tryRefusedAgain } from '@/lib/work/intake/try-again'
import { permitCampaign } from '@/lib/work/people/permission'

const params = z.strictObject({ slug: z.string() })

/**
 * GET /api/campaigns/{slug}/files?limit=500&cursor=…&fate=refused&search=…&first=refused
 * Leads. `{ files: […], nextCursor, summary }`: each file with its fate and reason, in the order of delivery or refused ones
 * first; `summary` counts all files by fate, and its `working` is false when no job is left to do, so that a script can wait.
 */
export const GET = route({
  params,
  query: FileListQuery,
  handler: async ({ db, viewer, params, query }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'lead')
    return Response.json(await listDeliveredFiles(db, permit, query), {
      headers: { 'cache-control': 'private, no-store' },
    })
  },
})

/** POST /api/campaigns/{slug}/files `{"retry":"refused"}`: leads have refused files tried again. Answers `{ files: count }`. */
export const POST = route({
  params,
  body: z.strictObject({ retry: z.literal('refused', 'Send {"retry":"refused"}.') }),
  handler: async ({ db, viewer, params }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'lead')
    return Response.json({ files: await tryRefusedAgain(db, permit) })
  },
})
