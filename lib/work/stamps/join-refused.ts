import 'server-only'
import { listReplacedBy, takeRefusedForBandsOf } from '@/db/queries/duplicates'
import { isoTime } from '@/lib/platform/clock'
import { groupBy } from '@/lib/work/intake/group-by'
import type { CampaignWork, ImagingTools } from './campaign-work'
import { matchByHeader, matchPage } from './match-waiting'
import type { MatchedFile } from './waiting-candidates'

/**
 * Adds to the files of a candidate those that were refused because the older version of one of them had their band. So files
 * whose bands were mixed up can be corrected in any order and far apart; which bands they have, only reading them together tells.
 */
export async function joinRefused(
  tools: ImagingTools,
  work: CampaignWork,
  groups: readonly MatchedFile[][],
): Promise<MatchedFile[][]> {
  const candidates = new Set(groups.map(([{ candidate }]) => candidate))
  const joined = groups.flat()
  // What joins replaces a file too, for whose band another may have been refused.
  for (let added = joined; added.length > 0;) {
    const replaced = await listReplacedBy(
      tools.db,
      added.map(({ file }) => file.id),
    )
    const again = await takeRefusedForBandsOf(tools.db, work.campaignId, replaced, isoTime())
    if (again.length === 0) break
    const { matched, unmatched } = await matchPage(tools, work, again)
    const byHeader = await matchByHeader(tools, work, unmatched)
    // Of another candidate than it was by now: it is stored again, so the next look finds it.
    added = [...matched, ...byHeader.matched].filter(({ candidate }) => candidates.has(candidate))
    joined.push(...added)
  }
  return [...groupBy(joined, ({ candidate }) => candidate).values()]
}
