import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { runConsensus } from '@/lib/work/consensus/run-consensus'
import { permitCampaign } from '@/lib/work/people/permission'

/** POST /api/campaigns/{slug}/consensus: runs at once and answers the summary. Leads. Without new input nothing is written. */
export const POST = route({
  params: z.strictObject({ slug: z.string() }),
  handler: async ({ db, viewer, params }) => {
    const permit = await permitCampaign(db, viewer, params.slug, 'lead')
    const { id, unchanged, ruleVersion, inputDigest, createdAt, summary } = await runConsensus(db, permit)
    return Response.json({ run: id, unchanged, rule: ruleVersion, inputDigest, createdAt, ...summary })
  },
})
