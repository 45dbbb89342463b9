import 'server-only'
import { setImmediate as nextTurn } from 'node:timers/promises'
import type { Kysely } from 'kysely'
import { requireRule } from '@/db/queries/campaigns'
import { requireCampaign } from '@/db/queries/candidates'
import {
  findNewestRun,
  insertRun,
  insertVerdicts,
  newestInput,
  type NewVerdict,
  type RunBounds,
} from '@/db/queries/consensus'
import { listConfirmedToName } from '@/db/queries/states'
import type { DB } from '@/db/schema'
import type { Campaign } from '@/db/schema/campaigns'
import type { Run, RunSummary } from '@/db/schema/consensus'
import { fromJson } from '@/db/schema/values'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import { conflict } from '@/lib/platform/problems/problem'
import { ruleOf, type RuleInForce } from '@/lib/work/campaigns/rule-in-force'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { applyVerdicts } from './apply-state'
import { judgeRun, readRun, type ComputedRun, type ReadRun, type RunInput } from './compute-run'
import { giveDesignations } from './give-designations'
import { makeUpLooks } from './make-up-looks'
import { refreshEstimates } from './refresh-estimates'

export interface RunAnswer {
  id: number
  /** Nothing had changed since this run, and nothing was written. */
  unchanged: boolean
  ruleVersion: number
  inputDigest: string
  createdAt: string
  summary: RunSummary
}

/** Verdict rows written by one statement. */
const CHUNK = 500
const ATTEMPTS = 5

/** A lead runs the consensus now. Running it again without a new grade or rule changes nothing. */
export function runConsensus(db: Kysely<DB>, permit: CampaignPermit<'lead'>): Promise<RunAnswer> {
  return runCampaign(db, permit.campaign, permit.viewer.id)
}

/** The run that starts by itself, as a job. */
export async function runConsensusByItself(db: Kysely<DB>, campaignId: number): Promise<RunAnswer> {
  return runCampaign(db, await requireCampaign(db, campaignId), null)
}

/**
 * Reads and computes outside a transaction, so that grading goes on meanwhile, and writes in one. What was read is fixed by
 * the newest grade at the start; if another run or a new rule came in between, it starts again. Estimates follow after it.
 */
async function runCampaign(db: Kysely<DB>, campaign: Campaign, startedBy: number | null): Promise<RunAnswer> {
  for (let attempt = 1; attempt <= ATTEMPTS; attempt++) {
    const before = await findNewestRun(db, campaign.id)
    const rule = ruleOf(await requireRule(db, campaign.id))
    const newest = await newestInput(db, campaign.id)
    const input = { campaignId: campaign.id, rule, ...newest }
    const read = await readRun(db, input)
    if (before && before.rule_id === rule.id && before.input_digest === read.inputDigest) {
      await nameLateComers(db, campaign)
      await followRun(db, input, read)
      return answer(before, rule, true)
    }
    const computed = await judgeRun(db, input, read)
    const written = await db.transaction().execute(async (transaction) => {
      const meanwhile = await findNewestRun(transaction, campaign.id)
      const ruleNow = await requireRule(transaction, campaign.id)
      if (meanwhile?.id !== before?.id || ruleNow.id !== rule.id) return null
      return writeRun(transaction, campaign, { rule, newest, computed, startedBy })
    })
    if (!written) continue
    await followRun(db, input, read)
    return answer(written, rule, false)
  }
  throw conflict('runs-overlap', 'Other consensus runs of this campaign kept coming in between. Try again in a moment.')
}

/** What follows from a run and need not be in one transaction with it: done again by the next where a process was killed. */
async function followRun(db: Kysely<DB>, input: RunInput, read: ReadRun): Promise<void> {
  await refreshEstimates(db, input.campaignId, input.rule)
  if (input.newestLeftOutId > 0) await makeUpLooks(db, input.campaignId, input.rule, read.leftOut)
}

async function writeRun(
  transaction: Kysely<DB>,
  campaign: Campaign,
  run: {
    rule: RuleInForce
    newest: RunBounds
    computed: ComputedRun
    startedBy: number | null
  },
): Promise<Run> {
  const now = isoTime()
  const { inputDigest, summary, model, changed } = run.computed
  const row = await insertRun(transaction, {
    campaignId: campaign.id,
    ruleId: run.rule.id,
    inputDigest,
    ...run.newest,
    summary,
    model,
    startedBy: run.startedBy,
    now,
  })
  for (let start = 0; start < changed.length; start += CHUNK) {
    await writeVerdicts(transaction, campaign, row.id, changed.slice(start, start + CHUNK), now)
    await nextTurn()
  }
  await giveDesignations(transaction, campaign, await listConfirmedToName(transaction, campaign.id), now)
  await recordEvent(transaction, {
    personId: run.startedBy,
    campaignId: campaign.id,
    action: 'consensus.ran',
    subject: `run ${row.id}`,
    detail: { rule: run.rule.version, changed: changed.length, inputDigest },
  })
  return row
}

async function writeVerdicts(
  transaction: Kysely<DB>,
  campaign: Campaign,
  runId: number,
  verdicts: readonly NewVerdict[],
  now: string,
): Promise<void> {
  const ids = await insertVerdicts(transaction, runId, verdicts)
  const outcomes = verdicts.map(({ candidateId, outcome }) => ({
    candidateId,
    state: outcome,
    restsOn: { cause: 'verdict' as const, id: ids.get(candidateId) as number },
  }))
  await applyVerdicts(transaction, campaign, outcomes, now)
}

/** A position can come after the candidate was confirmed, and brings no new run. */
async function nameLateComers(db: Kysely<DB>, campaign: Campaign): Promise<void> {
  if ((await listConfirmedToName(db, campaign.id)).length === 0) return
  await db.transaction().execute(async (transaction) => {
    await giveDesignations(transaction, campaign, await listConfirmedToName(transaction, campaign.id), isoTime())
  })
}

function answer(run: Run, rule: RuleInForce, unchanged: boolean): RunAnswer {
  return {
    id: run.id,
    unchanged,
    ruleVersion: rule.version,
    inputDigest: run.input_digest,
    createdAt: run.created_at,
    summary: fromJson(run.summary),
  }
}
