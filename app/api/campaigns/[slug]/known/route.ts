import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { blobs } from '@/lib/platform/storage/blobs'
import { knownPage } from '@/lib/work/matching/known-page'
import { listReader } from '@/lib/work/matching/list-reader'
import { uploadList } from '@/lib/work/matching/upload-list'
import { permitCampaign } from '@/lib/work/people/permission'

const params = z.strictObject({ slug: z.string() })

/** GET: the lists of known objects, `{ lists, known, due }`, with how far those that are read or matched have come. Leads and viewers. */
export const GET = route({
  params,
  handler: async ({ db, viewer, params: { slug } }) => {
    const permit = await permitCampaign(db, viewer, slug, 'read')
    return Response.json(await knownPage(db, permit), { headers: { 'cache-control': 'private, no-store' } })
  },
})

async function* nothing(): AsyncGenerator<Uint8Array> {}

/**
 * POST ?name=marsh-lenses.csv with a CSV or VOTable as the raw body. Leads. Needs a Content-Length. Answers `{ id, isNew }`: 201 when
 * it is new, 200 when the same bytes are here already. Its columns are chosen and it is taken in afterwards, on its page.
 */
export const POST = route({
  params,
  query: z.strictObject({ name: z.string().min(1).max(500) }),
  handler: async ({ request, db, viewer, params: { slug }, query: { name } }) => {
    const permit = await permitCampaign(db, viewer, slug, 'lead')
    const body = { chunks: request.body ?? nothing(), contentLength: request.headers.get('content-length') }
    const kept = await uploadList(db, permit, { store: blobs(), reader: listReader }, { name, body })
    return Response.json(kept, { status: kept.isNew ? 201 : 200, headers: { 'cache-control': 'no-store' } })
  },
})
