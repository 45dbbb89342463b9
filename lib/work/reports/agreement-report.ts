import 'server-only'
import type { Kysely } from 'kysely'
import { listLeftOutNow, type LeftOutNow } from '@/db/queries/left-out'
import { listEverGraders, listHeldCandidates, newestReportInput, type ReportInput } from '@/db/queries/reports'
import type { DB } from '@/db/schema'
import { isoTime } from '@/lib/platform/clock'
import { forbidden } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { raiseAlerts } from './alerts'
import { computeReport, type ComputedReport } from './compute-report'
import type { AgreementReport, GraderLabel } from './report-types'

/** A report is as old as this at the most, because the pace depends on the hour. */
const LONGEST_KEPT_MS = 10 * 60_000
/** One that took long is not made anew for every grade, but this often. */
const SLOW_MS = 1000
const SLOW_KEPT_MS = 60_000
const MOST_CAMPAIGNS = 50

interface Kept {
  input: ReportInput
  madeAt: number
  tookMs: number
  report: Promise<ComputedReport>
}

const keptByDatabase = new WeakMap<Kysely<DB>, Map<number, Kept>>()

/**
 * How far the graders agree and how reliable they are, for leads with names and for viewers under pseudonyms. Computed once
 * for everybody who asks, and again when a grade, run, rule, ruling, candidate or decision on leaving out has come since.
 * @throws Problem 403 for graders, whose own judgement must not know how the others judge.
 */
export async function agreementReport(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  now = Date.now(),
): Promise<AgreementReport> {
  if (permit.role === 'grader') {
    throw forbidden('Agreement is shown to leads and viewers. Graders judge best without knowing how the others do.')
  }
  const campaignId = permit.campaign.id
  const { personIds, isOut, tables, ...report } = await keptReport(db, campaignId, now)
  const [members, leftOut, held] = await Promise.all([
    listEverGraders(db, campaignId),
    listLeftOutNow(db, campaignId),
    listHeldCandidates(db, campaignId, isoTime(now - Date.now())),
  ])
  const memberOf = new Map(members.map((member) => [member.personId, member]))
  const outOf = new Map(leftOut.map((decision) => [decision.personId, decision]))
  const isLead = permit.role === 'lead'
  const graders = personIds.map((personId): GraderLabel => {
    const member = memberOf.get(personId)
    return {
      label: (isLead ? member?.name : member?.pseudonym) ?? '',
      ended: member?.endedAt !== null,
      personId: isLead ? personId : null,
      leftOut: decisionFor(outOf.get(personId), isLead),
    }
  })
  const alerts = raiseAlerts({ ...report, tables, isOut, personIds, held, now })
  return { ...report, graders, alerts }
}

/** A reason may name people, so that viewers see only since when. */
function decisionFor(decision: LeftOutNow | undefined, isLead: boolean): GraderLabel['leftOut'] {
  if (!decision) return null
  return { since: decision.since, by: isLead ? decision.decidedBy : null, reason: isLead ? decision.reason : null }
}

async function keptReport(db: Kysely<DB>, campaignId: number, now: number): Promise<ComputedReport> {
  const kept = keptByDatabase.get(db) ?? new Map<number, Kept>()
  keptByDatabase.set(db, kept)
  const input = await newestReportInput(db, campaignId)
  const found = kept.get(campaignId)
  if (found && serves(found, input, now)) return found.report
  const started = performance.now()
  const entry: Kept = { input, madeAt: now, tookMs: Infinity, report: computeReport(db, campaignId, input, now) }
  kept.delete(campaignId)
  kept.set(campaignId, entry)
  for (const oldest of kept.keys()) if (kept.size > MOST_CAMPAIGNS) kept.delete(oldest)
  try {
    const report = await entry.report
    entry.tookMs = performance.now() - started
    return report
  } catch (error) {
    kept.delete(campaignId)
    throw error
  }
}

function serves({ input: before, madeAt, tookMs }: Kept, input: ReportInput, now: number): boolean {
  const age = now - madeAt
  if (age < 0 || age > LONGEST_KEPT_MS) return false
  const decisionsStand =
    before.newestRunId === input.newestRunId &&
    before.newestRuleId === input.newestRuleId &&
    before.newestLeftOutId === input.newestLeftOutId &&
    before.usesSheet === input.usesSheet
  if (!decisionsStand) return false
  const nothingNew =
    before.newestGradeId === input.newestGradeId &&
    before.newestRulingId === input.newestRulingId &&
    before.newestCandidateId === input.newestCandidateId &&
    before.newestSheetMarkId === input.newestSheetMarkId
  return nothingNew || (tookMs > SLOW_MS && age < SLOW_KEPT_MS)
}
