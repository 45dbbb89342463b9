import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { FileListQuery, listDeliveredFiles } from '@/lib/work/intake/list-files'
import { LookUp, lookUpFiles } from '@/lib/work/intake/look-up-files'
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

const Retry = z.strictObject({ retry: z.literal('refused', 'Send {"retry":"refused"}, or {"look":[{"name":…}]}.') })

/**
 * POST /api/campaigns/{slug}/files, leads. `{"retry":"refused"}` has refused files tried again and answers `{ files: count }`.
 * `{"look":[{"name":…}, …]}` answers what is here under up to 5,000 names, `{ files: [{ sha256, bytes, fate } or null, …], told }`
 * in their order, so that a folder sent again sends only what is missing; `told` is what manifests here say of each.
 */
export const POST = route({
  params,
  body: z.union([Retry, LookUp]),
  handler: async ({ db, viewer, params, body }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'lead')
    if ('look' in body) return Response.json(await lookUpFiles(db, permit, body))
    return Response.json({ files: await tryRefusedAgain(db, permit) })
  },
})
