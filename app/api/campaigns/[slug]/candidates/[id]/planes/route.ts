import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { blobs } from '@/lib/platform/storage/blobs'
import { permitCampaign } from '@/lib/work/people/permission'
import { imagePool } from '@/lib/work/stamps/image-pool'
import { servePlanes } from '@/lib/work/stamps/serve-planes'

/**
 * GET /api/campaigns/{slug}/candidates/{id}/planes: the pixels of a candidate, to members, coded as in
 * lib/science/imaging/plane-codec.ts. The answer is a gzip file, because Next.js takes Content-Encoding off what a route sends.
 * With `?v=` and the present hash a browser keeps it for ever; without it asks each time whether it changed.
 */
export const GET = route({
  params: z.object({ slug: z.string(), id: z.coerce.number('The candidate id is a whole number.').int().positive() }),
  query: z.object({ v: z.string().optional() }),
  handler: async ({ request, db, viewer, params, query }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'read')
    const { hash, bytes } = await servePlanes(db, permit, blobs(), imagePool, params.id)
    const headers = {
      etag: `"${hash}"`,
      'content-type': 'application/gzip',
      'cache-control': query.v === hash ? 'private, max-age=31536000, immutable' : 'private, no-cache',
      'x-content-type-options': 'nosniff',
    }
    if (request.headers.get('if-none-match') === headers.etag) return new Response(null, { status: 304, headers })
    const zipped = await bytes()
    return new Response(zipped, { headers: { ...headers, 'content-length': String(zipped.byteLength) } })
  },
})
