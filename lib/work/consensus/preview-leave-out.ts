import 'server-only'
import type { Kysely } from 'kysely'
import { requireRule } from '@/db/queries/campaigns'
import { newestInput, type NewVerdict } from '@/db/queries/consensus'
import { countLooksOf, listLeftOutNow, type LeftOutNow } from '@/db/queries/left-out'
import { findMembership } from '@/db/queries/people'
import { listStandings } from '@/db/queries/states'
import type { DB } from '@/db/schema'
import type { CandidateState } from '@/db/schema/intake'
import { notFound } from '@/lib/platform/problems/problem'
import { ruleOf } from '@/lib/work/campaigns/rule-in-force'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { judgeRun } from './compute-run'
import { InputDigest } from './input-digest'
import { readGrades } from './read-grades'

interface StateMove {
  from: CandidateState
  to: CandidateState
  candidates: number
}

export interface LeaveOutPreview {
  name: string
  /** the person's looks in the campaign, corrections not counted */
  looks: number
  /** the standing decision; null where the grades count */
  leftOut: LeftOutNow | null
  /** candidates that would change their state, the most first */
  moves: StateMove[]
  /** candidates whose verdict would be another, while a ruling keeps their state */
  keptByRuling: number
}

/**
 * What leaving a grader out, or counting them again, would change: the consensus is computed as its next run would, reliabilities
 * learned anew where the rule goes by them, and nothing is written.
 * @throws Problem 404 never a member of this campaign.
 */
export async function previewLeaveOut(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  personId: number,
): Promise<LeaveOutPreview> {
  const campaignId = permit.campaign.id
  const member = await findMembership(db, campaignId, personId)
  if (!member) throw notFound('member')
  const outNow = await listLeftOutNow(db, campaignId)
  const standing = outNow.find((decision) => decision.personId === personId) ?? null
  const others = outNow.map((decision) => decision.personId).filter((id) => id !== personId)
  const leftOut = (standing ? others : [...others, personId]).sort((a, b) => a - b)

  const rule = ruleOf(await requireRule(db, campaignId))
  const input = { campaignId, rule, ...(await newestInput(db, campaignId)) }
  const digest = new InputDigest(rule, leftOut)
  const grades = await readGrades(db, input, {
    leftOut: new Set(leftOut),
    withCalibration: rule.method === 'reliability',
    digest,
  })
  const { changed } = await judgeRun(db, input, { inputDigest: digest.hex(), grades, leftOut })
  return {
    name: member.name,
    looks: await countLooksOf(db, campaignId, personId),
    leftOut: standing,
    ...(await compareStates(db, changed)),
  }
}

/** Candidates looked up by one statement. */
const CHUNK = 2000

async function compareStates(
  db: Kysely<DB>,
  verdicts: readonly NewVerdict[],
): Promise<Pick<LeaveOutPreview, 'moves' | 'keptByRuling'>> {
  const moves = new Map<string, StateMove>()
  let keptByRuling = 0
  for (let start = 0; start < verdicts.length; start += CHUNK) {
    const outcomeOf = new Map(verdicts.slice(start, start + CHUNK).map((one) => [one.candidateId, one.outcome]))
    for (const { id, state, ruled } of await listStandings(db, [...outcomeOf.keys()])) {
      const to = outcomeOf.get(id)
      if (!to || to === state) continue
      if (ruled) {
        keptByRuling += 1
        continue
      }
      const move = moves.get(`${state} ${to}`) ?? { from: state, to, candidates: 0 }
      move.candidates += 1
      moves.set(`${state} ${to}`, move)
    }
  }
  return { moves: [...moves.values()].sort((a, b) => b.candidates - a.candidates), keptByRuling }
}
