import 'server-only'
import { setImmediate as nextTurn } from 'node:timers/promises'
import type { Kysely } from 'kysely'
import {
  listCandidatesWithVerdict,
  listLeftOutPeople,
  listPseudonyms,
  type NewVerdict,
  type RunBounds,
} from '@/db/queries/consensus'
import type { DB } from '@/db/schema'
import type { RunModel, RunSummary } from '@/db/schema/consensus'
import { UNKNOWN_TRUTH } from '@/lib/science/agreement/dawid-skene-options'
import { GRADE_POINTS, GRADES } from '@/lib/science/agreement/grades'
import { OUTCOMES } from '@/lib/science/agreement/outcomes-at-once'
import type { RuleInForce } from '@/lib/work/campaigns/rule-in-force'
import { fitModel } from './fit-model'
import { InputDigest } from './input-digest'
import type { Judge } from './judge'
import { judgeByMean } from './judge-by-mean'
import { judgeByReliability } from './judge-by-reliability'
import { measureAgreement } from './measure-agreement'
import { judgeByPass, readNotSentOn } from './not-sent-on'
import { PAGE, readGrades, type RunGrades } from './read-grades'

export interface RunInput extends RunBounds {
  campaignId: number
  rule: RuleInForce
}

export interface ReadRun {
  inputDigest: string
  grades: RunGrades
  /** in ascending order */
  leftOut: number[]
}

export interface ComputedRun {
  inputDigest: string
  summary: RunSummary
  /** of the reliability method */
  model: RunModel | null
  /** Every verdict that differs from the candidate's verdict before. */
  changed: NewVerdict[]
  /** Code of OUTCOMES of every row that was read; calibration stamps, which are not judged, are open. */
  outcomes: Uint8Array
}

/**
 * What a run makes of its input, without writing. Grades and decisions on who is left out only grow, so that the same input gives
 * the same digest, model, summary and verdicts at any later time; `changed` is against the verdicts that the candidates have now.
 */
export async function computeRun(db: Kysely<DB>, input: RunInput): Promise<ComputedRun> {
  return judgeRun(db, input, await readRun(db, input))
}

/** Reads what the run judges. Two queries a page. */
export async function readRun(db: Kysely<DB>, input: RunInput): Promise<ReadRun> {
  const leftOut = await listLeftOutPeople(db, input.campaignId, input.newestLeftOutId)
  const digest = new InputDigest(input.rule, leftOut, input.newestSheetMarkId)
  const withCalibration = input.rule.method === 'reliability'
  const grades = await readGrades(db, input, { leftOut: new Set(leftOut), withCalibration, digest })
  return { inputDigest: digest.hex(), grades, leftOut }
}

/** One query a page. */
export async function judgeRun(db: Kysely<DB>, input: RunInput, read: ReadRun): Promise<ComputedRun> {
  const { grades } = read
  const model = input.rule.method === 'reliability' ? await fitModel(grades, read.leftOut) : null
  const judge = await judgeFor(db, input, grades, model)
  const { ids, truth, table } = grades
  const counts: number[][] = []
  const changed: NewVerdict[] = []
  const outcomes = new Uint8Array(ids.length)
  const states = { open: 0, split: 0, confirmed: 0, 'set aside': 0 }
  const totals = { candidates: 0, grades: 0, cannotJudge: 0 }
  let row = 0
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
    const notSentOn = await readNotSentOn(db, input, { from: page[0].id, to: last.id })
    for (const candidate of page) {
      while (row < ids.length && ids[row] < candidate.id) row += 1
      if (ids[row] !== candidate.id || truth[row] !== UNKNOWN_TRUTH) continue
      const judged = judge(row)
      const reasonOfPass = notSentOn.get(candidate.id)
      const unseen = judged.judgement.grades + judged.judgement.cannotJudge === 0
      const { judgement, reason, differs } = reasonOfPass && unseen ? judgeByPass(judged, reasonOfPass) : judged
      counts.push(countPoints(table.cell.subarray(table.start[row], table.start[row + 1])))
      states[judgement.outcome] += 1
      outcomes[row] = OUTCOMES.indexOf(judgement.outcome)
      totals.candidates += 1
      totals.grades += judgement.grades
      totals.cannotJudge += judgement.cannotJudge
      // Nothing is said of a candidate that nobody has looked at, unless the first pass or a verdict before said something.
      const looks = judgement.grades + judgement.cannotJudge
      if ((looks > 0 || judgement.outcome !== 'open' || candidate.outcome !== null) && differs(candidate)) {
        changed.push({
          candidateId: candidate.id,
          ...judgement,
          // Made when it is written: a hundred thousand reasons are a hundred megabytes.
          get reason() {
            return reason()
          },
        })
      }
    }
  }
  const { 'set aside': setAside, ...others } = states
  const summary: RunSummary = {
    ...totals,
    graders: grades.peopleAtCandidates.size,
    ...others,
    setAside,
    changed: changed.length,
    ...measureAgreement(counts),
  }
  return { inputDigest: read.inputDigest, summary, model, changed, outcomes }
}

async function judgeFor(
  db: Kysely<DB>,
  { campaignId, rule }: RunInput,
  grades: RunGrades,
  model: RunModel | null,
): Promise<Judge> {
  if (rule.method === 'mean' || !model) {
    if (rule.method !== 'mean') throw new Error('A run by the reliability method has a model.')
    return judgeByMean(rule, grades)
  }
  const pseudonyms = await listPseudonyms(db, campaignId)
  return judgeByReliability(rule, grades, model, (personId) => pseudonyms.get(personId) ?? 'a member')
}

function countPoints(cells: Int32Array): number[] {
  const counts = GRADES.map(() => 0)
  for (const cell of cells) counts[GRADE_POINTS[GRADES[cell % GRADES.length]]] += 1
  return counts
}
