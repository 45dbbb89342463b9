import 'server-only'
import { setImmediate as nextTurn } from 'node:timers/promises'
import type { Kysely } from 'kysely'
import { deleteEstimates, hasEstimates, listStandingAnswers, listToEstimate, setWants } from '@/db/queries/estimates'
import type { DB } from '@/db/schema'
import type { ReliabilityRuleInForce, RuleInForce } from '@/lib/work/campaigns/rule-in-force'
import { writeEstimates } from '@/lib/work/queue/keep-estimates'
import { newestModel } from '@/lib/work/queue/model-of-run'

/** Candidates brought up to date in one transaction. */
const PAGE = 250

/**
 * Brings every candidate's estimate, and what the queue goes by, up to the newest run: under its model where it has one, none
 * where it went by the mean. In short transactions a page each, every one of grades as they stand then, so that grading goes on
 * meanwhile; what is up to date already is not written, so that a run that was killed before the end is completed by the next.
 */
export async function refreshEstimates(db: Kysely<DB>, campaignId: number, rule: RuleInForce): Promise<void> {
  if (rule.method === 'mean' && !(await hasEstimates(db, campaignId))) return
  for (let after: number | null = 0; after !== null; await nextTurn()) {
    const page: { campaignId: number; after: number; limit: number } = { campaignId, after, limit: PAGE }
    after = await (rule.method === 'mean' ? dropPage(db, page) : refreshPage(db, page, rule))
  }
}

interface Page {
  campaignId: number
  after: number
  limit: number
}

/** Returns the last candidate of the page; null at the end, and where a newer run has taken over. */
async function refreshPage(db: Kysely<DB>, page: Page, rule: ReliabilityRuleInForce): Promise<number | null> {
  return db.transaction().execute(async (transaction) => {
    const run = await newestModel(transaction, page.campaignId)
    if (!run || run.ruleId !== rule.id) return null
    const candidates = await listToEstimate(transaction, page)
    const last = candidates.at(-1)
    if (!last) return null
    const answers = await listStandingAnswers(transaction, page.campaignId, candidates[0].id, last.id)
    await writeEstimates(transaction, run, rule, candidates, answers)
    return last.id
  })
}

async function dropPage(db: Kysely<DB>, page: Page): Promise<number | null> {
  return db.transaction().execute(async (transaction) => {
    const candidates = await listToEstimate(transaction, page)
    const ids = candidates.map(({ id }) => id)
    await deleteEstimates(transaction, ids)
    const wanting = candidates.filter(({ settled, lookValue }) => settled !== 0 || lookValue !== 0)
    const none = { settled: 0, lookValue: 0 } as const
    await setWants(
      transaction,
      wanting.map(({ id }) => ({ id, ...none })),
    )
    return ids.at(-1) ?? null
  })
}
