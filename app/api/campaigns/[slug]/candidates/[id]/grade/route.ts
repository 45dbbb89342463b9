import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { ownAnswer } from '@/lib/work/grading/own-answer'
import { recordGrade } from '@/lib/work/grading/record-grade'
import { permitCampaign } from '@/lib/work/people/permission'

const params = z.object({
  slug: z.string(),
  id: z.coerce.number('The candidate id is a whole number.').int().positive(),
})

/** GET: what stands of this person's own at the candidate, and whether a correction would be taken. Graders and leads. */
export const GET = route({
  params,
  handler: async ({ db, viewer, params }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'grade')
    return Response.json(await ownAnswer(db, permit, params.id), { headers: { 'cache-control': 'no-store' } })
  },
})

/** PUT: this person's grade of the candidate, or a correction of it; repeating a call changes nothing. Graders and leads. */
export const PUT = route({
  params,
  body: GradeInput,
  handler: async ({ db, viewer, params, body }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'grade')
    return Response.json(await recordGrade(db, permit, params.id, body))
  },
})
