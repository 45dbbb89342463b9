import 'server-only'
import type { Kysely } from 'kysely'
import { insertRule, listRules, requireRule, setNamePattern } from '@/db/queries/campaigns'
import type { DB } from '@/db/schema'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import { enqueueJob } from '@/lib/platform/jobs/enqueue-job'
import { JOB } from '@/lib/platform/jobs/job-kinds'
import { requestConsensus } from '@/lib/platform/jobs/request-consensus'
import { conflict } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { ruleOf, type RuleInForce } from './rule-in-force'
import { ruleRowOf, type RuleInput } from './rule-input'

export type RuleVersion = RuleInForce & {
  author: string
  createdAt: string
}

/** Every version of the rule, newest (the one in force) first. */
export async function listRuleVersions(db: Kysely<DB>, permit: CampaignPermit<'lead'>): Promise<RuleVersion[]> {
  const rows = await listRules(db, permit.campaign.id)
  return rows.map((row) => ({ ...ruleOf(row), author: row.author, createdAt: row.created_at }))
}

/**
 * Appends a version and asks for a consensus run, which applies it to every candidate. Earlier versions stay as they were.
 * @param triedAgainst version that must still be in force; any when left out.
 * @throws Problem 409 `rule-changed`: another version came since; `rule-unchanged`: it is the rule in force.
 */
export async function changeRule(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  input: RuleInput,
  triedAgainst?: number,
): Promise<{ version: number }> {
  const { campaign, viewer } = permit
  return db.transaction().execute(async (transaction) => {
    const before = ruleOf(await requireRule(transaction, campaign.id))
    if (triedAgainst !== undefined && before.version !== triedAgainst) {
      throw conflict(
        'rule-changed',
        `Version ${before.version} of the rule came into force since this page was opened, so yours was not made the rule. Load the page again to try it against that version; your thresholds stay in the address.`,
      )
    }
    if (isSameRule(before, input))
      throw conflict('rule-unchanged', `This is the rule in force already (version ${before.version}).`)
    const version = before.version + 1
    const now = isoTime()
    const campaignId = campaign.id
    await insertRule(transaction, { campaignId, version, ...ruleRowOf(input), createdBy: viewer.id, now })
    await requestConsensus(transaction, campaignId)
    await recordEvent(transaction, {
      personId: viewer.id,
      campaignId,
      action: 'campaigns.rule-changed',
      subject: String(version),
    })
    return { version }
  })
}

function isSameRule(before: RuleInForce, input: RuleInput): boolean {
  const known: Record<string, unknown> = { ...before }
  return Object.entries(input).every(([name, value]) => known[name] === value)
}

/** For files that arrive from now on and for those that could not be matched so far; what was matched already stays. */
export async function changeNamePattern(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  namePattern: string | null,
): Promise<void> {
  await db.transaction().execute(async (transaction) => {
    const campaignId = permit.campaign.id
    await setNamePattern(transaction, campaignId, namePattern)
    // Kind and payload are the intake room's, which comes below this one.
    await enqueueJob(transaction, {
      kind: JOB.readFiles,
      campaignId,
      uniqueKey: `${JOB.readFiles}:${campaignId}:unmatched`,
      payload: { campaignId, unmatchedAgain: true },
    })
    await recordEvent(transaction, {
      personId: permit.viewer.id,
      campaignId: permit.campaign.id,
      action: 'campaigns.name-pattern-changed',
      detail: { from: permit.campaign.name_pattern, to: namePattern },
    })
  })
}
