import { route } from '@/app/api/_lib/route'
import { listCampaigns } from '@/lib/work/campaigns/list-campaigns'
import { withLeft } from '@/lib/work/queue/left-to-look-at'

/**
 * GET /api/campaigns: the campaigns that this person is in, newest first, as `{ campaigns: [{ slug, … }] }`. A grader gets null
 * for the counts of confirmed candidates and splits.
 */
export const GET = route({
  handler: async ({ db, viewer }) =>
    Response.json(
      { campaigns: await withLeft(db, viewer, await listCampaigns(db, viewer)) },
      { headers: { 'cache-control': 'private, no-store' } },
    ),
})
