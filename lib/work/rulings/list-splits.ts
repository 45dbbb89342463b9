import 'server-only'
import type { Kysely } from 'kysely'
import { countCandidates } from '@/db/queries/campaigns'
import { countVotes } from '@/db/queries/verdicts'
import { listRecentRulings, listSplits, type RecentRuling } from '@/db/queries/rulings'
import type { DB } from '@/db/schema'
import type { GradeLetter } from '@/db/schema/grading'
import { ruleInForce } from '@/lib/work/campaigns/rule-in-force'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { picturesOf, type PictureView } from '@/lib/work/stamps/candidate-pictures'
import { worthInWords, type MeanThresholds, type SplitOrder } from './split-worth'

export interface SplitCase {
  id: number
  name: string
  mean: number | null
  spread: number | null
  /** of a lens, by the live estimate; null by the mean */
  probability: number | null
  /** What settling it is worth, in words. */
  worth: string
  lastRulingId: number | null
  votes: Record<GradeLetter, number>
  picture: PictureView | null
}

export type { RecentRuling }

export interface Splits {
  /** Of the whole campaign; `cases` holds the first of them. */
  total: number
  order: SplitOrder
  method: 'mean' | 'reliability'
  cases: SplitCase[]
  /** Candidates that were ruled on last, newest first. */
  ruled: RecentRuling[]
}

export const MOST_CASES = 200
const MOST_RULED = 8

/** The splits that wait for a lead, by default those first that are worth most, and what was ruled last. */
export async function listSplitCases(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  order: SplitOrder = 'worth',
): Promise<Splits> {
  const { campaign } = permit
  const rule = await ruleInForce(db, campaign.id)
  const thresholds: MeanThresholds = rule.method === 'mean' ? rule : null
  const rows = await listSplits(db, campaign.id, { by: order, thresholds }, MOST_CASES)
  const ids = rows.map((row) => row.id)
  const [counts, votes, pictures, ruled] = await Promise.all([
    countCandidates(db, campaign.id),
    countVotes(db, ids),
    picturesOf(db, campaign, ids),
    listRecentRulings(db, campaign.id, MOST_RULED),
  ])
  return {
    total: counts.split,
    order,
    method: rule.method,
    ruled,
    cases: rows.map(({ id, name, mean, spread, probability, lastRulingId }) => ({
      id,
      name,
      mean,
      spread,
      probability,
      worth: worthInWords({ probability, mean, spread }, thresholds),
      lastRulingId,
      votes: votes.get(id) ?? { A: 0, B: 0, C: 0, N: 0, U: 0 },
      picture: pictures.get(id)?.views.find((view) => view.url !== null) ?? null,
    })),
  }
}
