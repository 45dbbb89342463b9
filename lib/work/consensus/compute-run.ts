import 'server-only'
import { setImmediate as nextTurn } from 'node:timers/promises'
import type { Kysely } from 'kysely'
import {
  listCandidatesWithVerdict,
  listCountedAnswers,
  type CandidateWithVerdict,
  type CountedAnswer,
  type NewVerdict,
} from '@/db/queries/consensus'
import type { DB } from '@/db/schema'
import type { RunSummary } from '@/db/schema/consensus'
import { GRADE_POINTS } from '@/lib/science/agreement/grades'
import { decide } from '@/lib/science/agreement/mean-rule'
import type { RuleInForce } from '@/lib/work/campaigns/rule-in-force'
import { InputDigest } from './input-digest'
import { measureAgreement } from './measure-agreement'

/** Candidates read and decided before other work of the process gets its turn. */
const PAGE = 500

export interface RunInput {
  campaignId: number
  rule: RuleInForce
  newestGradeId: number
  newestCandidateId: number
}

export interface ComputedRun {
  inputDigest: string
  summary: RunSummary
  /** Every verdict that differs from the candidate's verdict before. */
  changed: NewVerdict[]
}

/**
 * What a run makes of its input, without writing. Grades only grow, so that the same input gives the same digest, summary
 * and verdicts at any later time; `changed` is against the verdicts that the candidates have now. Two queries a page.
 */
export async function computeRun(db: Kysely<DB>, input: RunInput): Promise<ComputedRun> {
  const { rule } = input
  if (rule.method !== 'mean') throw new RangeError('Only rules of the mean method are computed.')
  const digest = new InputDigest(rule)
  const counts: Uint16Array[] = []
  const people = new Set<number>()
  const changed: NewVerdict[] = []
  const outcomes = { open: 0, split: 0, confirmed: 0, 'set aside': 0 }
  const totals = { candidates: 0, grades: 0, cannotJudge: 0 }
  for (let after = 0; ; await nextTurn()) {
    const page = await listCandidatesWithVerdict(db, {
      campaignId: input.campaignId,
      after,
      upTo: input.newestCandidateId,
      limit: PAGE,
    })
    const last = page.at(-1)
    if (!last) break
    after = last.id
    const answers = await listCountedAnswers(db, {
      campaignId: input.campaignId,
      from: page[0].id,
      to: last.id,
      upTo: input.newestGradeId,
    })
    const byCandidate = groupByCandidate(answers)
    const counted: CountedAnswer[] = []
    for (const candidate of page) {
      const given = byCandidate.get(candidate.id) ?? []
      counted.push(...given)
      for (const answer of given) people.add(answer.personId)
      counts.push(countPoints(given))
      const { n, ...decision } = decide(rule, given)
      outcomes[decision.outcome] += 1
      totals.grades += n
      totals.cannotJudge += decision.cannotJudge
      const verdict: NewVerdict = { candidateId: candidate.id, grades: n, ...decision }
      if (given.length > 0 && differs(verdict, candidate)) changed.push(verdict)
    }
    totals.candidates += page.length
    digest.add(counted)
  }
  const { 'set aside': setAside, ...states } = outcomes
  const summary: RunSummary = {
    ...totals,
    graders: people.size,
    ...states,
    setAside,
    changed: changed.length,
    ...measureAgreement(counts),
  }
  return { inputDigest: digest.hex(), summary, changed }
}

function groupByCandidate(answers: readonly CountedAnswer[]): Map<number, CountedAnswer[]> {
  const groups = new Map<number, CountedAnswer[]>()
  for (const answer of answers) {
    const group = groups.get(answer.candidateId)
    if (group) group.push(answer)
    else groups.set(answer.candidateId, [answer])
  }
  return groups
}

function countPoints(answers: readonly CountedAnswer[]): Uint16Array {
  const counts = new Uint16Array(4)
  for (const { grade } of answers) if (grade !== 'U') counts[GRADE_POINTS[grade]] += 1
  return counts
}

function differs(verdict: NewVerdict, before: CandidateWithVerdict): boolean {
  return (
    verdict.outcome !== before.outcome ||
    verdict.grades !== before.grades ||
    verdict.cannotJudge !== before.cannotJudge ||
    verdict.mean !== before.mean ||
    verdict.spread !== before.spread ||
    verdict.reason !== before.reason
  )
}
