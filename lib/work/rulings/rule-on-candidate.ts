import 'server-only'
import type { Kysely } from 'kysely'
import { setAsksWithdrawn } from '@/db/queries/asked-looks'
import { findCandidate } from '@/db/queries/candidates'
import { listVerdictsOf } from '@/db/queries/verdicts'
import { countLiveLeases } from '@/db/queries/grading'
import { findStandingMerge } from '@/db/queries/merges'
import { insertRuling, listRulingsOf } from '@/db/queries/rulings'
import type { DB } from '@/db/schema'
import type { Candidate, CandidateState } from '@/db/schema/intake'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import { conflict, notFound } from '@/lib/platform/problems/problem'
import { applyStates, type StateOutcome } from '@/lib/work/consensus/apply-state'
import { ruleInForce } from '@/lib/work/campaigns/rule-in-force'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { sendOnDropped } from '@/lib/work/sheet/send-on'
import { RulingInput } from './ruling-input'

export interface RulingAnswer {
  rulingId: number
  state: CandidateState
  /** Asked looks that nobody has to give any more; a later ruling does not ask for them again. */
  asksWithdrawn: number
  /** The first pass had not sent it on; reopening does. */
  sentOn: boolean
}

/**
 * A lead decides a candidate. The ruling is appended and stands over every verdict until a newer ruling; 'by verdict' steps
 * back, and the newest verdict holds again. Looks that were asked for are withdrawn when it is decided. State, change, catalogue and
 * audit event are written with it or not at all.
 * @throws Problem 404 no such candidate here; 409 `calibration`, `merged`, `ruled-meanwhile`, `no-ruling`. ZodError on bad input.
 */
export async function ruleOnCandidate(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  candidateId: number,
  input: RulingInput,
): Promise<RulingAnswer> {
  const ruling = RulingInput.parse(input)
  return db.transaction().execute(async (transaction) => {
    const candidate = await requireCandidate(transaction, permit, candidateId)
    const merge = await findStandingMerge(transaction, candidateId)
    if (merge) {
      throw conflict(
        'merged',
        `${candidate.name} was merged into ${merge.keptName}: rule on that one, or part the two first.`,
      )
    }
    return ruleWithin(transaction, permit, candidate, ruling)
  })
}

export async function requireCandidate(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  candidateId: number,
): Promise<Candidate> {
  const candidate = await findCandidate(db, permit.campaign.id, candidateId)
  if (!candidate) throw notFound('candidate')
  return candidate
}

/** The same within a transaction of the caller's, who has seen to it that the candidate is not merged: for merging and parting. */
export async function ruleWithin(
  transaction: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  candidate: Candidate,
  ruling: RulingInput,
): Promise<RulingAnswer> {
  const { id: candidateId } = candidate
  await assertCanRule(transaction, candidate, ruling)
  const now = isoTime()
  const { outcome, grade, reason } = ruling
  const personId = permit.viewer.id
  const { gradesWanted } = await ruleInForce(transaction, permit.campaign.id)
  const { own, others } = await countLiveLeases(transaction, candidateId, personId, now)
  const looksAsked = looksAskedBy(outcome, candidate, gradesWanted, own + others)
  const row = { candidateId, personId, outcome, grade, reason, looksAsked, now }
  const rulingId = await insertRuling(transaction, row)
  const decides = outcome === 'confirmed' || outcome === 'set aside'
  const asksWithdrawn = decides ? await setAsksWithdrawn(transaction, { candidateId }, now) : 0
  // What is to be looked at again must reach the bench.
  const sentOn = outcome === 'open' && (await sendOnDropped(transaction, permit, candidateId, now))
  const result = await outcomeOf(transaction, candidate, ruling, rulingId)
  await applyStates(transaction, permit.campaign, [result], now)
  await recordEvent(transaction, {
    personId,
    campaignId: permit.campaign.id,
    action: 'rulings.ruled',
    subject: candidate.name,
    detail: {
      ruling: rulingId,
      outcome,
      grade,
      from: candidate.state,
      to: result.state,
      ...(sentOn ? { sentOn } : {}),
    },
  })
  return { rulingId, state: result.state, asksWithdrawn, sentOn }
}

/**
 * Reopening a candidate that has all its looks, or is settled, asks for one more; again reopened it is one more again. Any other
 * ruling takes back what was asked for and neither given nor held on somebody's bench: a lease holds a place. The looks that stand
 * are never above the larger of what is asked and what the rule wants.
 */
function looksAskedBy(
  outcome: RulingInput['outcome'],
  candidate: Candidate,
  gradesWanted: number,
  looksHeld: number,
): number {
  const { grades_given: given, looks_asked: asked } = candidate
  if (outcome !== 'open') return Math.min(asked, given + looksHeld)
  const wantsNone = given >= Math.max(gradesWanted, asked) || (candidate.settled === 1 && given >= asked)
  return wantsNone ? given + 1 : asked
}

async function assertCanRule(db: Kysely<DB>, candidate: Candidate, ruling: RulingInput): Promise<void> {
  if (candidate.truth !== null) {
    throw conflict(
      'calibration',
      `${candidate.name} is a calibration stamp: its truth is known, so it is never ruled on.`,
    )
  }
  const newest = (await listRulingsOf(db, candidate.id)).at(0)
  if (ruling.lastRulingSeen !== undefined && ruling.lastRulingSeen !== (newest?.id ?? null)) {
    const who = newest ? `${newest.name} has ruled on ${candidate.name}` : `The rulings on ${candidate.name} changed`
    throw conflict('ruled-meanwhile', `${who} meanwhile. Read that ruling, then rule again if it should not stand.`)
  }
  if (ruling.outcome === 'by verdict' && (!newest || newest.outcome === 'by verdict')) {
    throw conflict(
      'no-ruling',
      `No ruling stands on ${candidate.name}, so there is nothing to hand back to the verdict.`,
    )
  }
}

async function outcomeOf(
  db: Kysely<DB>,
  candidate: Candidate,
  ruling: RulingInput,
  rulingId: number,
): Promise<StateOutcome> {
  const byRuling = { cause: 'ruling' as const, id: rulingId }
  if (ruling.outcome !== 'by verdict') return { candidateId: candidate.id, state: ruling.outcome, restsOn: byRuling }
  const verdict = (await listVerdictsOf(db, candidate.id)).at(-1)
  if (!verdict) return { candidateId: candidate.id, state: 'open', restsOn: byRuling }
  return {
    candidateId: candidate.id,
    state: verdict.outcome,
    restsOn: { cause: 'verdict', id: verdict.id },
    changedBy: byRuling,
  }
}
