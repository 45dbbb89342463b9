import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { assertPractised } from '@/lib/work/grading/may-begin'
import { permitCampaign } from '@/lib/work/people/permission'
import { giveBack } from '@/lib/work/queue/give-back'
import { lendNext } from '@/lib/work/queue/lend-next'
import { MOST_LENT } from '@/lib/work/queue/lease-time'

const params = z.object({ slug: z.string() })

/** GET: what this grader should see next, lent for a while. Asking again renews. Graders and leads. */
export const GET = route({
  params,
  query: z.strictObject({
    count: z.coerce
      .number('The count is a whole number.')
      .int('The count is a whole number.')
      .min(1, 'The count is at least 1.')
      .max(MOST_LENT, `The count is at most ${MOST_LENT}.`)
      .default(5),
  }),
  handler: async ({ db, viewer, params, query }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'grade')
    await assertPractised(db, permit)
    return Response.json(await lendNext(db, permit, query.count), { headers: { 'cache-control': 'no-store' } })
  },
})

const ids = z
  .string()
  .regex(/^\d{1,15}(,\d{1,15}){0,99}$/, 'The candidates are ids with commas between, at most 100.')
  .transform((text) => text.split(',').map(Number))

/** DELETE: gives back what was lent, all or the named candidates, so that others get it at once. Graders and leads. */
export const DELETE = route({
  params,
  query: z.strictObject({ candidates: ids.optional() }),
  handler: async ({ db, viewer, params, query }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'grade')
    return Response.json(await giveBack(db, permit, query.candidates ?? null))
  },
})
