import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { permitCampaign } from '@/lib/work/people/permission'
import { stampFolder } from '@/lib/work/stamps/imaging-tools'
import { serveStamp } from '@/lib/work/stamps/serve-stamp'
import { notFound } from '@/lib/platform/problems/problem'

/**
 * GET /api/campaigns/{slug}/stamps/{sha256}: one picture, to members. Its name is its hash, so a browser keeps it for ever and
 * asks no more; private, because what a campaign looks at is nobody else's business.
 */
export const GET = route({
  params: z.object({ slug: z.string(), sha256: z.string() }),
  handler: async ({ request, db, viewer, params }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'read')
    if (!/^[0-9a-f]{64}$/.test(params.sha256)) throw notFound('stamp')
    const etag = `"${params.sha256}"`
    const bytes = await serveStamp(db, permit, stampFolder(), params.sha256)
    const headers = {
      etag,
      'content-type': 'image/png',
      'cache-control': 'private, max-age=31536000, immutable',
      'x-content-type-options': 'nosniff',
    }
    if (request.headers.get('if-none-match') === etag) return new Response(null, { status: 304, headers })
    return new Response(bytes, { headers: { ...headers, 'content-length': String(bytes.byteLength) } })
  },
})
