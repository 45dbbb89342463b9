import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { OPEN_TO_ALL, preflight } from '@/app/r/_lib/open-to-all'
import { blobs } from '@/lib/platform/storage/blobs'
import { releaseNumber } from '@/lib/work/releases/newest-standing'
import { releaseToRead } from '@/lib/work/releases/read-release'
import { readReleasedStamp } from '@/lib/work/releases/read-released-stamp'

/**
 * GET /r/{slug}/{number}/stamps/{sha256}?entry={key}: a picture of an entry of that release. Its name is its hash, so it is kept for
 * ever: by everybody where the release is public, else by its reader alone and for an hour, since a link can be closed.
 */
export const GET = route({
  params: z.strictObject({
    slug: z.string(),
    number: z.string(),
    sha256: z.string().regex(/^[0-9a-f]{64}$/, 'A stamp is named by its SHA-256, 64 hexadecimal digits.'),
  }),
  query: z.object({
    entry: z.string({ error: 'Say of which entry, as ?entry= and its key.' }),
    key: z.string().optional(),
  }),
  handler: async ({ db, viewer, params, query }) => {
    const reader = { viewer, token: query.key ?? null }
    const release = await releaseToRead(db, params.slug, releaseNumber(params.number), reader)
    const bytes = await readReleasedStamp(db, blobs(), release.id, query.entry, params.sha256)
    const isPublic = release.access === 'public'
    return new Response(new Uint8Array(bytes), {
      headers: {
        ...(isPublic ? OPEN_TO_ALL : {}),
        etag: `"${params.sha256}"`,
        'content-type': 'image/png',
        'content-length': String(bytes.byteLength),
        'x-content-type-options': 'nosniff',
        'cache-control': isPublic ? 'public, max-age=31536000, immutable' : 'private, max-age=3600',
      },
    })
  },
})

export const OPTIONS = preflight
