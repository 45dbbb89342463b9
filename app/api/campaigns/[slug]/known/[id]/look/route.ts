import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { blobs } from '@/lib/platform/storage/blobs'
import { MappingInput } from '@/lib/work/matching/list-mapping'
import { listReader } from '@/lib/work/matching/list-reader'
import { lookAtUpload } from '@/lib/work/matching/upload-list'
import { permitCampaign } from '@/lib/work/people/permission'

/** A choice that is not whole yet is looked at too, and said to be so in the answer. */
const Looked = MappingInput.extend({ ra: z.string().max(500), dec: z.string().max(500) })

/** POST `{ mapping }`: the first rows of a list as they would be read by these columns, and what is wrong. Leads. Nothing is stored. */
export const POST = route({
  params: z.strictObject({ slug: z.string(), id: z.coerce.number().int().positive() }),
  body: z.strictObject({ mapping: Looked.nullable() }),
  handler: async ({ db, viewer, params: { slug, id }, body }) => {
    const permit = await permitCampaign(db, viewer, slug, 'lead')
    const look = await lookAtUpload(db, permit, { store: blobs(), reader: listReader }, id, body.mapping)
    return Response.json(look, { headers: { 'cache-control': 'private, no-store' } })
  },
})
