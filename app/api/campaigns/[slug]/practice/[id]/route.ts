import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { answerPractice, PracticeInput } from '@/lib/work/calibration/practice'
import { permitCampaign } from '@/lib/work/people/permission'

/** PUT: an answer to the stamp that practice shows; answers with its truth. The same call again tells the same. Graders and leads. */
export const PUT = route({
  params: z.object({ slug: z.string(), id: z.coerce.number().int().positive() }),
  body: PracticeInput,
  handler: async ({ db, viewer, params, body }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'grade')
    return Response.json(await answerPractice(db, permit, params.id, body), {
      headers: { 'cache-control': 'private, no-store' },
    })
  },
})
