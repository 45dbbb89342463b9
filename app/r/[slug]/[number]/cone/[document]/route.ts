import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { OPEN_TO_ALL, preflight } from '@/app/r/_lib/open-to-all'
import { config } from '@/lib/platform/config/config'
import { openedRelease } from '@/lib/work/releases/newest-standing'
import { describeService } from '@/lib/work/releases/describe-service'
import { VOSI_DOCUMENTS } from '@/lib/work/releases/vosi-documents'

/** GET /r/{slug}/{number}/cone/{capabilities, availability or tables}: what the cone search says of itself, VOSI 1.1. */
export const GET = route({
  params: z.strictObject({ slug: z.string(), number: z.string(), document: z.enum(VOSI_DOCUMENTS) }),
  query: z.object({ key: z.string().optional() }),
  handler: async ({ db, params, query }) => {
    const key = query.key ?? null
    const release = await openedRelease(db, params.slug, params.number, key)
    const address = new URL(`/r/${params.slug}/${params.number}/cone`, config().siteUrl).href
    const upSince = new Date(Date.now() - process.uptime() * 1000).toISOString()
    const text = await describeService(db, release, params.document, { address, key, upSince })
    const type = 'text/xml; charset=utf-8'
    return new Response(text, { headers: { ...OPEN_TO_ALL, 'content-type': type, 'cache-control': 'no-cache' } })
  },
})

export const OPTIONS = preflight
