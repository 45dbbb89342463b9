import 'server-only'
import type { Kysely } from 'kysely'
import {
  deleteEstimates,
  findToEstimate,
  listStandingAnswers,
  setWants,
  upsertEstimates,
  type CandidateToEstimate,
  type NewEstimate,
  type StandingAnswer,
  type StandingEstimate,
  type Want,
} from '@/db/queries/estimates'
import type { DB } from '@/db/schema'
import type { ReliabilityRule } from '@/lib/science/agreement/reliability-rule'
import type { RuleInForce } from '@/lib/work/campaigns/rule-in-force'
import { estimateLens, lookValue, wantOf } from './lens-estimate'
import { newestModel, type RunsModel } from './model-of-run'

/**
 * Brings the estimate of a candidate up to its grades, at once and in the transaction that changed them: under the model of the
 * newest run, by the rule that the run applied. Before the first run by that rule there is none, and the run makes them all.
 */
export async function keepEstimate(
  transaction: Kysely<DB>,
  campaignId: number,
  rule: RuleInForce,
  candidateId: number,
): Promise<void> {
  if (rule.method !== 'reliability') return
  const run = await newestModel(transaction, campaignId)
  const candidate = run && (await findToEstimate(transaction, candidateId))
  if (!candidate || run.ruleId !== rule.id) return
  const answers = await listStandingAnswers(transaction, campaignId, candidateId, candidateId)
  await writeEstimates(transaction, run, rule, [candidate], answers)
}

/** Writes the estimates of these candidates, and what the queue goes by, where they differ. Answers are in order of candidate. */
export async function writeEstimates(
  transaction: Kysely<DB>,
  run: RunsModel,
  rule: ReliabilityRule,
  candidates: readonly CandidateToEstimate[],
  answers: readonly StandingAnswer[],
): Promise<void> {
  const estimates: NewEstimate[] = []
  const wants: Want[] = []
  const stamps: number[] = []
  let at = 0
  for (const candidate of candidates) {
    while (at < answers.length && answers[at].candidateId < candidate.id) at += 1
    const from = at
    while (at < answers.length && answers[at].candidateId === candidate.id) at += 1
    if (candidate.calibration && candidate.runId !== null) stamps.push(candidate.id)
    const estimate = estimateOf(run, rule, candidate.id, answers.slice(from, at))
    if (!candidate.calibration && !isStanding(candidate, estimate)) estimates.push(estimate)
    const want = candidate.calibration
      ? wantOfStamp(run, rule, candidate.looksGiven)
      : wantOf(run.model, rule, estimate, candidate.looksGiven)
    if (want.settled !== candidate.settled || want.lookValue !== candidate.lookValue) {
      wants.push({ id: candidate.id, ...want })
    }
  }
  await upsertEstimates(transaction, estimates)
  await deleteEstimates(transaction, stamps)
  await setWants(transaction, wants)
}

function isStanding(before: StandingEstimate, now: NewEstimate): boolean {
  return (
    before.runId === now.runId &&
    before.newestGradeId === now.newestGradeId &&
    before.grades === now.grades &&
    before.cannotJudge === now.cannotJudge &&
    before.evidence === now.evidence &&
    before.probability === now.probability &&
    before.outcome === now.outcome
  )
}

function estimateOf(
  { runId, model }: RunsModel,
  rule: ReliabilityRule,
  candidateId: number,
  answers: readonly StandingAnswer[],
): NewEstimate {
  const newestGradeId = answers.reduce((newest, { id }) => Math.max(newest, id), 0)
  return { candidateId, runId, newestGradeId, ...estimateLens(model, rule, answers) }
}

/**
 * A calibration stamp has no estimate and is never settled, because its looks teach what the graders' grades are worth. It keeps
 * the worth of a candidate that nobody has seen, so that it comes among those and nothing tells it apart.
 */
function wantOfStamp({ model }: RunsModel, rule: ReliabilityRule, looksGiven: number): Omit<Want, 'id'> {
  return { settled: 0, lookValue: looksGiven < rule.mostLooks ? lookValue(model, model.lensShare) : 0 }
}
