import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { showCandidates } from '@/lib/work/consensus/what-if'
import { permitCampaign } from '@/lib/work/people/permission'

const SENTENCE = 'Name one to 100 candidates by their ids, such as ?ids=3,14.'

/** GET /api/campaigns/{slug}/what-if/candidates?ids=3,14: name and thumbnail of these candidates. Leads. */
export const GET = route({
  params: z.strictObject({ slug: z.string() }),
  query: z.strictObject({
    ids: z
      .string(SENTENCE)
      .regex(/^\d{1,15}(,\d{1,15}){0,99}$/, SENTENCE)
      .transform((text) => text.split(',').map(Number)),
  }),
  handler: async ({ db, viewer, params, query }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'lead')
    return Response.json({ candidates: await showCandidates(db, permit, query.ids) })
  },
})
