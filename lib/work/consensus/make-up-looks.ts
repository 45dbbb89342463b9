import 'server-only'
import { setImmediate as nextTurn } from 'node:timers/promises'
import type { Kysely } from 'kysely'
import { listLookNeeds, setLooksAsked, type LookNeed } from '@/db/queries/left-out'
import type { DB } from '@/db/schema'
import { isoTime } from '@/lib/platform/clock'
import type { RuleInForce } from '@/lib/work/campaigns/rule-in-force'

const PAGE = 500

/**
 * A look of a person who is left out takes a place and decides nothing. Where that leaves a candidate open with no place to give, as
 * many looks are asked for as were lost; once the person counts again, or a verdict has been reached, what was asked for and not
 * given is taken back, except what somebody holds on their bench: a lease holds a place. What a lead's ruling has reopened is left as
 * the lead asked. In short transactions a page each.
 */
export async function makeUpLooks(
  db: Kysely<DB>,
  campaignId: number,
  rule: RuleInForce,
  leftOut: readonly number[],
): Promise<void> {
  let after: number | undefined = 0
  while (after !== undefined) {
    const from: number = after
    after = await db.transaction().execute(async (transaction) => {
      const range = { campaignId, after: from, limit: PAGE, now: isoTime() }
      const page = await listLookNeeds(transaction, range, leftOut)
      const wants = page.map((need) => ({ id: need.id, looksAsked: looksAskedFor(need, rule.gradesWanted) }))
      await setLooksAsked(
        transaction,
        wants.filter(({ looksAsked }, at) => looksAsked !== page[at].looksAsked),
      )
      return page.at(-1)?.id
    })
    await nextTurn()
  }
}

function looksAskedFor(need: LookNeed, gradesWanted: number): number {
  const { looksGiven, looksAsked, looksLost, looksHeld } = need
  if (need.ruled === 1) return looksAsked
  const stuck = need.state === 'open' && need.settled === 0 && looksLost > 0 && looksGiven >= gradesWanted
  return stuck ? gradesWanted + looksLost : Math.min(looksAsked, looksGiven + looksHeld)
}
