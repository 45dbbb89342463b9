import 'server-only'
import type { Kysely } from 'kysely'
import { countAsks } from '@/db/queries/asked-looks'
import { countCandidates, type CampaignCounts } from '@/db/queries/campaigns'
import { listOpenInvitations } from '@/db/queries/invitations'
import { countUnfinishedJobs } from '@/db/queries/jobs'
import { findNewestRun } from '@/db/queries/consensus'
import { countRefusedFiles, listNewestConfirmed, sumLooks } from '@/db/queries/overview'
import { listMembers } from '@/db/queries/people'
import { countGradedCandidates, countOpenCandidates } from '@/db/queries/queue'
import type { DB } from '@/db/schema'
import type { RunSummary } from '@/db/schema/consensus'
import { fromJson } from '@/db/schema/values'
import { isoTime } from '@/lib/platform/clock'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { askerOf } from './asker'
import { candidateScope } from './candidate-scope'
import { looksTold, type LooksTold } from './looks-told'
import { ruleInForce, type RuleInForce } from './rule-in-force'

export interface CampaignOverview {
  rule: RuleInForce
  candidates: number
  imaged: number
  /** Looks at all imaged candidates together. */
  grading: LooksTold
  /** For those who grade: what is left for them, what they have looked at, and looks that somebody asks of them. */
  mine: { left: number; lookedAt: number; asked: number } | null
  /** For leads and viewers. A grader's own judgement must not know how the others' turned out. */
  outcome: {
    counts: CampaignCounts
    run: { at: string; summary: RunSummary } | null
    newestConfirmed: { id: number; name: string }[]
  } | null
  /** For leads. */
  upkeep: { graders: number; openInvitations: number; refusedFiles: number; jobs: number } | null
}

const CONFIRMED_SHOWN = 8

async function outcomeOf(db: Kysely<DB>, campaignId: number, counts: CampaignCounts) {
  const [run, newestConfirmed] = await Promise.all([
    findNewestRun(db, campaignId),
    listNewestConfirmed(db, campaignId, CONFIRMED_SHOWN),
  ])
  return { counts, run: run && { at: run.created_at, summary: fromJson(run.summary) }, newestConfirmed }
}

async function upkeepOf(db: Kysely<DB>, campaignId: number) {
  const [members, invitations, refusedFiles, jobs] = await Promise.all([
    listMembers(db, campaignId),
    listOpenInvitations(db, campaignId),
    countRefusedFiles(db, campaignId),
    countUnfinishedJobs(db, campaignId),
  ])
  const graders = members.filter((member) => member.role !== 'viewer').length
  return { graders, openInvitations: invitations.length, refusedFiles, jobs }
}

/** Where the campaign stands and what waits, as far as the person's role may know. */
export async function campaignOverview(db: Kysely<DB>, permit: CampaignPermit<'read'>): Promise<CampaignOverview> {
  const { campaign, viewer, role } = permit
  // The same as the grader's table counts: by the difference they would know how many calibration stamps there are.
  const counted = {
    campaignId: campaign.id,
    withCalibration: role === 'grader' && candidateScope(permit).withCalibration,
  }
  const [rule, counts] = await Promise.all([
    ruleInForce(db, campaign.id),
    countCandidates(db, campaign.id, counted.withCalibration),
  ])
  const asker = askerOf(campaign, viewer.id, rule, isoTime())
  const [grading, left, lookedAt, asks, outcome, upkeep] = await Promise.all([
    sumLooks(db, counted, rule.gradesWanted),
    role === 'viewer' ? 0 : countOpenCandidates(db, asker),
    role === 'viewer' ? 0 : countGradedCandidates(db, campaign.id, viewer.id),
    countAsks(db, { campaignId: campaign.id, personId: viewer.id }),
    role === 'grader' ? null : outcomeOf(db, campaign.id, counts),
    role === 'lead' ? upkeepOf(db, campaign.id) : null,
  ])
  return {
    rule,
    candidates: counts.candidates,
    imaged: counts.imaged,
    grading: looksTold(grading, role, rule.method),
    mine: role === 'viewer' ? null : { left, lookedAt, asked: asks.open },
    outcome,
    upkeep,
  }
}
