import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { storedFileResponse } from '@/app/api/_lib/stored-file-response'
import { blobs } from '@/lib/platform/storage/blobs'
import { savedName } from '@/lib/work/releases/release-files'
import { openReleaseFile, releaseToRead } from '@/lib/work/releases/read-release'

/**
 * GET /api/campaigns/{slug}/releases/{number}/files/{name}: a file of a release, for leads and viewers, and by its access for anybody
 * else (`?key=` has the secret of a link).
 */
export const GET = route({
  params: z.strictObject({ slug: z.string(), number: z.coerce.number().int(), name: z.string() }),
  query: z.object({ key: z.string().optional() }),
  handler: async ({ request, db, viewer, params, query }) => {
    const release = await releaseToRead(db, params.slug, params.number, { viewer, token: query.key ?? null })
    const file = await openReleaseFile(db, blobs(), release, params.name)
    const fileName = savedName(release, file.name)
    return storedFileResponse(request, file, { fileName, shared: release.access === 'public' })
  },
})
