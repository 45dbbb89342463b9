import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { storedFileResponse } from '@/app/api/_lib/stored-file-response'
import { OPEN_TO_ALL, preflight } from '@/app/r/_lib/open-to-all'
import { blobs } from '@/lib/platform/storage/blobs'
import { releaseNumber } from '@/lib/work/releases/newest-standing'
import { savedName } from '@/lib/work/releases/release-files'
import { openReleaseFile, releaseToRead } from '@/lib/work/releases/read-release'

/** GET /r/{slug}/{number}/files/{name}: a file of a release, for whoever may read it. */
export const GET = route({
  params: z.strictObject({ slug: z.string(), number: z.string(), name: z.string() }),
  query: z.object({ key: z.string().optional() }),
  handler: async ({ request, db, viewer, params, query }) => {
    const reader = { viewer, token: query.key ?? null }
    const release = await releaseToRead(db, params.slug, releaseNumber(params.number), reader)
    const file = await openReleaseFile(db, blobs(), release, params.name)
    const isPublic = release.access === 'public'
    const fileName = savedName(release, file.name)
    const response = storedFileResponse(request, file, { fileName, shared: isPublic })
    if (isPublic) for (const [name, value] of Object.entries(OPEN_TO_ALL)) response.headers.set(name, value)
    return response
  },
})

export const OPTIONS = preflight
