import 'server-only'
import { setImmediate as nextTurn } from 'node:timers/promises'
import type { Kysely } from 'kysely'
import { listThumbnails } from '@/db/queries/catalogue'
import { findNewestRun, listCountedAnswers, newestInput } from '@/db/queries/consensus'
import { listLeftOutNow } from '@/db/queries/left-out'
import { countGradesAfter, listForWhatIf, listNamesOf, type CandidateForWhatIf } from '@/db/queries/what-if'
import type { DB } from '@/db/schema'
import type { RunModel } from '@/db/schema/consensus'
import { fromJson } from '@/db/schema/values'
import { fitDawidSkene } from '@/lib/science/agreement/dawid-skene'
import { gradeCode, groupByCandidate, type GradesByCandidate } from '@/lib/science/agreement/grade-table'
import { LENS, LENS_MODEL, ratesOfGraders, type GraderRates } from '@/lib/science/agreement/lens-model'
import { OUTCOMES, tallyCandidates } from '@/lib/science/agreement/outcomes-at-once'
import { conflict } from '@/lib/platform/problems/problem'
import { changeRule } from '@/lib/work/campaigns/change-settings'
import { ruleInForce, type RuleInForce } from '@/lib/work/campaigns/rule-in-force'
import type { RuleInput } from '@/lib/work/campaigns/rule-input'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { stampUrl } from '@/lib/work/stamps/candidate-pictures'
import { truthCode, type WhatIfAbout, type WhatIfRows } from './what-if-columns'

/** Candidates read before other work of the process gets its turn. */
const PAGE = 500

/**
 * Every candidate of the campaign in numbers, from the grades that count now: all that a rule needs to be tried without asking the
 * server again. Leads only: it holds what calibration stamps are. Graders who are left out count nowhere.
 */
export async function readWhatIf(db: Kysely<DB>, permit: CampaignPermit<'lead'>): Promise<WhatIfRows> {
  const { id: campaignId } = permit.campaign
  const rule = await ruleInForce(db, campaignId)
  const run = await findNewestRun(db, campaignId)
  const leftOut = new Set((await listLeftOutNow(db, campaignId)).map(({ personId }) => personId))
  const read = await readGrades(db, campaignId, leftOut)
  const { rows, people, cannotJudge, table } = read
  const truth = Int8Array.from(rows, (row) => truthCode(row.truth))
  const model = run?.model ? fromJson(run.model) : null
  const { lensShare, rates } = model ? ratesOfRun(model, people) : fitNow(table, truth)
  const from: WhatIfAbout['reliabilities'] =
    model && run ? { from: 'run', runId: run.id, at: run.created_at } : table.cell.length > 0 ? { from: 'fit' } : null
  return {
    about: {
      rule: ruleAlone(rule),
      lensShare: from ? lensShare : null,
      reliabilities: from,
      gradesSinceRun: run ? await countGradesAfter(db, campaignId, run.newest_grade_id) : null,
      graders: people.length,
      leftOut: leftOut.size,
    },
    candidates: rows.findLastIndex((row) => row.truth === null) + 1,
    ids: Int32Array.from(rows, (row) => row.id),
    state: Uint8Array.from(rows, (row) => OUTCOMES.indexOf(row.state)),
    ruled: Uint8Array.from(rows, (row) => row.ruled),
    truth,
    tallies: tallyCandidates(table, rates, cannotJudge),
  }
}

function ruleAlone(rule: RuleInForce): RuleInput & { version: number } {
  const { method, version, gradesWanted, leastGrades } = rule
  if (method === 'mean') {
    const { confirmMean, setAsideMean, splitSpread } = rule
    return { method, version, gradesWanted, leastGrades, confirmMean, setAsideMean, splitSpread }
  }
  const { falseConfirmed, missedLens } = rule
  return { method, version, gradesWanted, leastGrades, falseConfirmed, missedLens }
}

interface ReadGrades {
  /** candidates of the search, then calibration stamps, each by id */
  rows: CandidateForWhatIf[]
  /** graders in order of their number in the table */
  people: number[]
  cannotJudge: Uint16Array
  table: GradesByCandidate
}

async function readGrades(db: Kysely<DB>, campaignId: number, leftOut: ReadonlySet<number>): Promise<ReadGrades> {
  const { newestGradeId: upTo } = await newestInput(db, campaignId)
  const found: CandidateForWhatIf[] = []
  const answers: { candidateId: number; grader: number; grade: number }[] = []
  const graderOf = new Map<number, number>()
  for (;;) {
    const page = await listForWhatIf(db, { campaignId, after: found.at(-1)?.id ?? 0, limit: PAGE })
    const last = page.at(-1)
    if (!last) break
    for (const answer of await listCountedAnswers(db, { campaignId, from: page[0].id, to: last.id, upTo })) {
      if (leftOut.has(answer.personId)) continue
      const grader = graderOf.get(answer.personId) ?? graderOf.size
      graderOf.set(answer.personId, grader)
      answers.push({ candidateId: answer.candidateId, grader, grade: gradeCode(answer.grade) })
    }
    found.push(...page)
    await nextTurn()
  }
  const rows = [...found.filter(({ truth }) => truth === null), ...found.filter(({ truth }) => truth !== null)]
  const rowOf = new Map(rows.map(({ id }, row) => [id, row]))
  const flat = {
    candidates: rows.length,
    graders: graderOf.size,
    grades: 4,
    candidateOf: Int32Array.from(answers, ({ candidateId }) => rowOf.get(candidateId) ?? -1),
    graderOf: Int32Array.from(answers, ({ grader }) => grader),
    gradeOf: Uint8Array.from(answers, ({ grade }) => grade),
  }
  const cannotJudge = new Uint16Array(rows.length)
  const judged = gradeCode('U')
  flat.gradeOf.forEach((grade, entry) => {
    if (grade === judged) cannotJudge[flat.candidateOf[entry]] += 1
  })
  return { rows, people: [...graderOf.keys()], cannotJudge, table: groupByCandidate(flat) }
}

function ratesOfRun(model: RunModel, people: readonly number[]): { lensShare: number; rates: GraderRates[] } {
  const known = new Map(model.graders.map((grader) => [grader.personId, grader]))
  return { lensShare: model.lensShare, rates: people.map((personId) => known.get(personId) ?? model.newcomer) }
}

function fitNow(table: GradesByCandidate, truth: Int8Array): { lensShare: number; rates: GraderRates[] } {
  const fit = fitDawidSkene(table, { ...LENS_MODEL, truth })
  return { lensShare: fit.classShares[LENS], rates: ratesOfGraders(fit) }
}

export interface ShownCandidate {
  id: number
  name: string
  /** address of a small picture */
  thumbnail: string | null
}

/** Names and pictures of some candidates, for the list of those that would change. */
export async function showCandidates(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  candidateIds: readonly number[],
): Promise<ShownCandidate[]> {
  const { id: campaignId, slug } = permit.campaign
  const names = await listNamesOf(db, campaignId, candidateIds)
  const stamps = await listThumbnails(db, campaignId, candidateIds)
  const hashes = new Map(stamps.map(({ candidateId, sha256 }) => [candidateId, sha256]))
  return names.map(({ id, name }) => {
    const sha256 = hashes.get(id)
    return { id, name, thumbnail: sha256 ? stampUrl(slug, sha256) : null }
  })
}

/**
 * Makes the rule that was tried the rule of the campaign, as its next version.
 * @param triedAgainst version that was in force when the numbers were read.
 * @throws Problem 409 `rule-changed`: another version came since; `rule-unchanged`: it is the rule in force.
 */
export async function makeRule(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  rule: RuleInput,
  triedAgainst: number,
): Promise<{ version: number }> {
  const { version } = await ruleInForce(db, permit.campaign.id)
  if (version !== triedAgainst) {
    throw conflict(
      'rule-changed',
      `Version ${version} of the rule came into force since this page was opened, so yours was not made the rule. Load the page again to try it against that version; your thresholds stay in the address.`,
    )
  }
  return changeRule(db, permit, rule)
}
