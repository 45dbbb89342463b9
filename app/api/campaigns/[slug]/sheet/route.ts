import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { permitCampaign } from '@/lib/work/people/permission'
import { giveSheetBack, lendSheet } from '@/lib/work/sheet/lend-sheet'
import { MarksInput, MOST_ON_SHEET } from '@/lib/work/sheet/mark-input'
import { recordMarks } from '@/lib/work/sheet/record-marks'
import { passersProgress } from '@/lib/work/sheet/sheet-progress'

const params = z.object({ slug: z.string() })

/** GET: what this person passes over next, theirs for a while. Asking again renews. Leads, and graders whom they picked. */
export const GET = route({
  params,
  query: z.strictObject({
    count: z.coerce
      .number('The count is a whole number.')
      .int('The count is a whole number.')
      .min(1, 'The count is at least 1.')
      .max(MOST_ON_SHEET, `The count is at most ${MOST_ON_SHEET}.`)
      .default(60),
  }),
  handler: async ({ db, viewer, params, query }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'grade')
    const lent = await lendSheet(db, permit, query.count)
    const progress = await passersProgress(db, permit)
    return Response.json({ ...lent, progress }, { headers: { 'cache-control': 'no-store' } })
  },
})

/** POST: marks of the first pass, each with an id of the client's. Repeating the same call changes nothing. */
export const POST = route({
  params,
  body: MarksInput,
  handler: async ({ db, viewer, params, body }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'grade')
    const recorded = await recordMarks(db, permit, body.marks)
    return Response.json({ ...recorded, progress: await passersProgress(db, permit) })
  },
})

/** DELETE: gives the sheet back, or the candidates that are named, so that others get them at once. */
export const DELETE = route({
  params,
  query: z.strictObject({
    candidates: z
      .string()
      .regex(/^\d{1,15}(,\d{1,15})*$/, 'Name candidates by their numbers, separated by commas.')
      .transform((text) => text.split(',').map(Number))
      .refine((ids) => ids.length <= 500, 'Name at most 500 candidates at once.')
      .optional(),
  }),
  handler: async ({ db, viewer, params, query }) => {
    await giveSheetBack(db, await permitCampaign(db, viewer, params.slug, 'grade'), query.candidates ?? null)
    return Response.json({})
  },
})
