import 'server-only'
import type { Kysely } from 'kysely'
import { requireRule } from '@/db/queries/campaigns'
import { newestInput } from '@/db/queries/consensus'
import { countLooksOf, listLeftOutNow, type LeftOutNow } from '@/db/queries/left-out'
import { findMembership } from '@/db/queries/people'
import { listStandings } from '@/db/queries/states'
import type { DB } from '@/db/schema'
import type { CandidateState } from '@/db/schema/intake'
import { OUTCOMES } from '@/lib/science/agreement/outcomes-at-once'
import { notFound } from '@/lib/platform/problems/problem'
import { ruleOf } from '@/lib/work/campaigns/rule-in-force'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { judgeRun, type RunInput } from './compute-run'
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
  /** candidates that the next run would judge otherwise than without this decision, the most first */
  moves: StateMove[]
  /** more of them whose state a ruling keeps */
  keptByRuling: number
}

/**
 * What leaving a grader out, or counting them again, would change: the consensus is computed twice from the same grades, with them
 * and without, reliabilities learned anew where the rule goes by them, and nothing is written. What grades since the newest run
 * change by themselves is in both.
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
  const now = outNow.map((decision) => decision.personId).sort((a, b) => a - b)
  const then = standing ? now.filter((id) => id !== personId) : [...now, personId].sort((a, b) => a - b)

  const rule = ruleOf(await requireRule(db, campaignId))
  const input = { campaignId, rule, ...(await newestInput(db, campaignId)) }
  const looks = await countLooksOf(db, campaignId, personId)
  const moved = looks > 0 ? await movedBy(db, input, { now, then }) : []
  return {
    name: member.name,
    looks,
    leftOut: standing,
    ...(await countMoves(db, moved)),
  }
}

type Moved = { id: number; from: CandidateState; to: CandidateState }[]

const MOST_KEPT = 20
/** By database and input, since a page that is shown again asks for the same two runs, seconds each at half a million grades. */
const kept = new WeakMap<Kysely<DB>, Map<string, Moved>>()

async function movedBy(db: Kysely<DB>, input: RunInput, leftOut: { now: number[]; then: number[] }): Promise<Moved> {
  const known = kept.get(db) ?? new Map<string, Moved>()
  kept.set(db, known)
  const key = JSON.stringify([input, leftOut])
  const moved =
    known.get(key) ?? differing(await judgeWithout(db, input, leftOut.now), await judgeWithout(db, input, leftOut.then))
  known.delete(key)
  known.set(key, moved)
  if (known.size > MOST_KEPT) known.delete(known.keys().next().value as string)
  return moved
}

interface JudgedRows {
  ids: Int32Array
  outcomes: Uint8Array
}

async function judgeWithout(db: Kysely<DB>, input: RunInput, leftOut: number[]): Promise<JudgedRows> {
  const digest = new InputDigest(input.rule, leftOut, input.newestSheetMarkId)
  const withCalibration = input.rule.method === 'reliability'
  const grades = await readGrades(db, input, { leftOut: new Set(leftOut), withCalibration, digest })
  const { outcomes } = await judgeRun(db, input, { inputDigest: digest.hex(), grades, leftOut })
  return { ids: grades.ids, outcomes }
}

/** Both are of the same candidates, which do not depend on whose grades count. */
function differing(now: JudgedRows, then: JudgedRows): Moved {
  const rows = Array.from(now.ids.keys()).filter((row) => now.outcomes[row] !== then.outcomes[row])
  return rows.map((row) => ({ id: now.ids[row], from: OUTCOMES[now.outcomes[row]], to: OUTCOMES[then.outcomes[row]] }))
}

/** Candidates looked up by one statement. */
const CHUNK = 2000

async function countMoves(db: Kysely<DB>, moved: Moved): Promise<Pick<LeaveOutPreview, 'moves' | 'keptByRuling'>> {
  const moves = new Map<string, StateMove>()
  let keptByRuling = 0
  for (let start = 0; start < moved.length; start += CHUNK) {
    const page = moved.slice(start, start + CHUNK)
    const standings = await listStandings(
      db,
      page.map(({ id }) => id),
    )
    const ruled = new Set(standings.filter((one) => one.ruled).map(({ id }) => id))
    for (const { id, from, to } of page) {
      if (ruled.has(id)) {
        keptByRuling += 1
        continue
      }
      const move = moves.get(`${from} ${to}`) ?? { from, to, candidates: 0 }
      move.candidates += 1
      moves.set(`${from} ${to}`, move)
    }
  }
  return { moves: [...moves.values()].sort((a, b) => b.candidates - a.candidates), keptByRuling }
}
