import { promisify } from 'node:util'
import { gzip } from 'node:zlib'
import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { readWhatIf } from '@/lib/work/consensus/what-if'
import { encodeWhatIf } from '@/lib/work/consensus/what-if-columns'
import { permitCampaign } from '@/lib/work/people/permission'

/**
 * GET /api/campaigns/{slug}/what-if: the numbers of every candidate, for trying rules in the browser, coded as in
 * lib/work/consensus/what-if-columns.ts. Leads. The answer is a gzip file, because Next.js takes Content-Encoding off what a
 * route sends.
 */
export const GET = route({
  params: z.strictObject({ slug: z.string() }),
  handler: async ({ db, viewer, params }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'lead')
    const zipped = await promisify(gzip)(encodeWhatIf(await readWhatIf(db, permit)), { level: 1 })
    return new Response(new Uint8Array(zipped), {
      headers: {
        'content-type': 'application/gzip',
        'content-length': String(zipped.byteLength),
        'cache-control': 'private, no-store',
        'x-content-type-options': 'nosniff',
      },
    })
  },
})
