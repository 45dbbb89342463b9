import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { blobs } from '@/lib/platform/storage/blobs'
import { BatchName } from '@/lib/work/intake/delivery-batch'
import { ChosenColumns } from '@/lib/work/intake/chosen-columns'
import { fileNameOfPath } from '@/lib/work/intake/file-name'
import { receiveFile } from '@/lib/work/intake/receive-file'
import { permitCampaign } from '@/lib/work/people/permission'

async function* nothing(): AsyncGenerator<Uint8Array> {}

/**
 * PUT /api/campaigns/{slug}/files/{name}?batch=…&columns=… with the file as the raw body, folders in the name kept.
 * Leads. `columns` of a manifest is JSON such as `{"candidate":"MYID"}`: which of its headers stand for which columns.
 * Needs a Content-Length. Answers `{ id, name, sha256, bytes, fate, reason, candidate, band }`: 201 when it is new, 200
 * when the same bytes are here already. The body is streamed to disk, never held in memory.
 */
export const PUT = route({
  params: z.object({ slug: z.string() }),
  query: z.strictObject({ batch: BatchName.optional(), columns: ChosenColumns.optional() }),
  handler: async ({ request, db, viewer, params, query }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'lead')
    const name = fileNameOfPath(request.nextUrl.pathname)
    const body = { chunks: request.body ?? nothing(), contentLength: request.headers.get('content-length') }
    const file = await receiveFile(db, permit, blobs(), { name, body, batch: query.batch, columns: query.columns })
    return Response.json(file, {
      status: file.fate === 'duplicate' ? 200 : 201,
      headers: { 'cache-control': 'no-store' },
    })
  },
})
