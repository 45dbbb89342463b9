import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { GALAXY_FILTERS } from '@/lib/work/calibration/galaxy-filters'
import { chooseGalaxies } from '@/lib/work/calibration/calibration-page'
import { permitCampaign } from '@/lib/work/people/permission'

/** GET: galaxies of the campaign to paint over, each with a picture. Leads. */
export const GET = route({
  params: z.strictObject({ slug: z.string() }),
  query: z.strictObject({
    which: z.enum(GALAXY_FILTERS, `It is one of: ${GALAXY_FILTERS.join(', ')}.`).default('set aside'),
    name: z
      .string()
      .trim()
      .max(80)
      .optional()
      .transform((text) => text || null),
  }),
  handler: async ({ db, viewer, params, query }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'lead')
    const galaxies = await chooseGalaxies(db, permit, query)
    return Response.json({ galaxies }, { headers: { 'cache-control': 'private, no-store' } })
  },
})
