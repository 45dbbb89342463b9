import 'server-only'
import type { Kysely } from 'kysely'
import { listCandidatesAfter, type CandidateRow } from '@/db/queries/catalogue'
import type { DB } from '@/db/schema'
import type { CandidateState } from '@/db/schema/intake'
import { noteShown, revealedTo } from '@/lib/work/grading/may-reveal'
import { calledTo } from '@/lib/work/campaigns/called'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { reasonInShort } from '@/lib/work/rulings/reason-in-short'
import { readCursor, writeCursor } from './candidate-cursor'
import { candidateScope } from '@/lib/work/campaigns/candidate-scope'

export interface ListedVerdict {
  outcome: CandidateState
  /** Grades and, beside them, how many could not judge. */
  grades: number
  cannotJudge: number
  /** Points, A 3 to N 0; null without grades. */
  mean: number | null
  spread: number | null
  /** Of a lens; null by the mean method. */
  probability: number | null
  reason: string
}

export interface ListedCandidate {
  id: number
  /** To a grader who has not judged it yet: its number. */
  name: string
  /** ICRS degrees */
  raDeg: number | null
  decDeg: number | null
  /** null while withheld */
  state: CandidateState | null
  verdict: ListedVerdict | null
  designation: string | null
  /** True for a grader who has not judged this candidate yet. */
  withheld: boolean
  /** For leads only: what the machine search gave it, and whether it is there to measure graders. */
  score?: number | null
  calibration?: boolean
}

export interface CandidatePage {
  candidates: ListedCandidate[]
  /** null on the last page */
  nextCursor: string | null
}

export interface CandidateListInput {
  cursor?: string
  limit: number
  /** Only candidates in this state, as far as the reader may know it. */
  state?: CandidateState
}

/** Candidates in the order of their arrival, page by page. See `candidateScope` for who sees what. */
export async function listCandidates(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  input: CandidateListInput,
): Promise<CandidatePage> {
  const afterId = input.cursor === undefined ? 0 : readCursor(input.cursor)
  const { limit, state } = input
  const rows = await listCandidatesAfter(db, candidateScope(permit), { afterId, limit: limit + 1, state })
  const page = rows.slice(0, limit)
  const last = page.at(-1)
  const candidates = await asListed(db, permit, page)
  await noteShown(
    db,
    permit,
    candidates.filter(saysJudgement).map(({ id }) => id),
  )
  return {
    candidates,
    nextCursor: rows.length > limit && last ? writeCursor(last.id) : null,
  }
}

/** The one place where rows become what this person may see. */
export async function asListed(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  rows: readonly CandidateRow[],
): Promise<ListedCandidate[]> {
  const revealed = await revealedTo(
    db,
    permit,
    rows.map((row) => row.id),
  )
  const called = await calledTo(
    db,
    permit,
    rows.map((row) => row.id),
  )
  return rows.map((row) => {
    const withheld = !revealed.has(row.id)
    const { id, raDeg, decDeg } = row
    const name = called(row)
    const forLead = permit.role === 'lead' ? { score: row.score, calibration: row.calibration === 1 } : {}
    const judged = withheld
      ? { state: null, verdict: null, designation: null }
      : { state: row.state, verdict: verdictOf(row, permit), designation: row.designation }
    return { id, name, raDeg, decDeg, ...judged, withheld, ...forLead }
  })
}

/** Whether the row tells what others or the rule made of the candidate. An open one without a verdict does not. */
export function saysJudgement({ state, verdict }: ListedCandidate): boolean {
  return verdict !== null || (state !== null && state !== 'open')
}

/**
 * Graders are told what is decided, and of the reason nothing of what each grade weighs: those are other people's numbers. What is
 * still open looks to them as a calibration stamp does, of which nothing is ever decided.
 */
function verdictOf(row: CandidateRow, { role }: CampaignPermit<'read'>): ListedVerdict | null {
  const { outcome, grades, cannotJudge, mean, spread, probability, reason } = row
  if (outcome === null || (role === 'grader' && outcome === 'open')) return null
  return {
    outcome,
    grades: grades ?? 0,
    cannotJudge: cannotJudge ?? 0,
    mean,
    spread,
    probability,
    reason: role === 'grader' ? reasonInShort(reason ?? '') : (reason ?? ''),
  }
}
