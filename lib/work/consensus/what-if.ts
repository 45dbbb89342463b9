import 'server-only'
import { setImmediate as nextTurn } from 'node:timers/promises'
import type { Kysely } from 'kysely'
import { listThumbnails } from '@/db/queries/catalogue'
import { findNewestRun, listLeftOutPeople, newestInput, type RunBounds } from '@/db/queries/consensus'
import {
  countGradesAfter,
  listForWhatIf,
  listNamesOf,
  listStampAnswers,
  type CandidateForWhatIf,
} from '@/db/queries/what-if'
import type { DB } from '@/db/schema'
import type { Run, RunModel } from '@/db/schema/consensus'
import { fromJson } from '@/db/schema/values'
import { UNKNOWN_TRUTH } from '@/lib/science/agreement/dawid-skene-options'
import { OUTCOMES, tallyCandidates, type CandidateTallies } from '@/lib/science/agreement/outcomes-at-once'
import { changeRule } from '@/lib/work/campaigns/change-settings'
import { ruleInForce, type RuleInForce } from '@/lib/work/campaigns/rule-in-force'
import type { RuleInput } from '@/lib/work/campaigns/rule-input'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { stampUrl } from '@/lib/work/stamps/candidate-pictures'
import { fitModel } from './fit-model'
import { InputDigest } from './input-digest'
import { readNotSentOn } from './not-sent-on'
import { readGrades } from './read-grades'
import { stampLooksOf } from './stamp-looks'
import type { WhatIfAbout, WhatIfRows } from './what-if-columns'

/** States read before other work of the process gets its turn. */
const PAGE = 2000

const ATTEMPTS = 3

/**
 * Every candidate of the campaign in numbers, from the grades that count now: all that a rule needs to be tried without asking the
 * server again. Leads only: it holds what calibration stamps are. Graders who are left out count nowhere.
 */
export async function readWhatIf(db: Kysely<DB>, permit: CampaignPermit<'lead'>): Promise<WhatIfRows> {
  const { id: campaignId } = permit.campaign
  for (let attempt = 1; ; attempt++) {
    const run = await findNewestRun(db, campaignId)
    const rows = await readBeside(db, campaignId, run)
    // A run that came in between has given states that rest on other grades than those that were read.
    const newest = await findNewestRun(db, campaignId)
    if (newest?.id === run?.id || attempt === ATTEMPTS) return rows
  }
}

async function readBeside(db: Kysely<DB>, campaignId: number, run: Run | null): Promise<WhatIfRows> {
  const rule = await ruleInForce(db, campaignId)
  const newest = await newestInput(db, campaignId)
  const leftOut = await listLeftOutPeople(db, campaignId, newest.newestLeftOutId)
  const out = new Set(leftOut)
  const grades = await readGrades(
    db,
    { campaignId, ...newest },
    { leftOut: out, withCalibration: true, digest: new InputDigest(rule, leftOut) },
  )
  const known = run?.model ? fromJson(run.model) : null
  const model = known ?? (await fitModel(grades, leftOut))
  const tallies = tallyCandidates(grades.table, ratesOf(model, grades.people), grades.cannotJudge)
  const { states, notSentOn } = await readStates(db, { campaignId, ...newest })
  const { truth, ids } = grades
  const rows = Array.from(ids.keys())
  const candidates = rows.filter((row) => truth[row] === UNKNOWN_TRUTH)
  const stamps = rows.filter((row) => truth[row] !== UNKNOWN_TRUTH)
  const order = [...candidates, ...stamps]
  const answers = await listStampAnswers(db, { campaignId, ...newest })
  const counted = answers.filter(({ personId }) => !out.has(personId))
  const reliabilities = reliabilitiesOf(known && run, grades.table.cell.length > 0)
  return {
    about: {
      rule: ruleAlone(rule),
      lensShare: reliabilities ? model.lensShare : null,
      reliabilities,
      gradesSinceRun: run ? await countGradesAfter(db, campaignId, run.newest_grade_id) : null,
      graders: grades.people.length,
      leftOut: leftOut.length,
    },
    candidates: candidates.length,
    ids: Int32Array.from(order, (row) => ids[row]),
    state: Uint8Array.from(order, (row) => OUTCOMES.indexOf(states.get(ids[row])?.state ?? 'open')),
    ruled: Uint8Array.from(order, (row) => states.get(ids[row])?.ruled ?? 0),
    truth: Int8Array.from(order, (row) => truth[row]),
    notSentOn: Uint8Array.from(order, (row) => (truth[row] === UNKNOWN_TRUTH && notSentOn.has(ids[row]) ? 1 : 0)),
    tallies: inOrder(tallies, order),
    stampLooks: stampLooksOf(grades, { lensShare: model.lensShare, evidence: tallies.evidence }, stamps, counted),
  }
}

function reliabilitiesOf(
  run: { id: number; created_at: string } | null | undefined,
  anyGrade: boolean,
): WhatIfAbout['reliabilities'] {
  if (run) return { from: 'run', runId: run.id, at: run.created_at }
  return anyGrade ? { from: 'fit' } : null
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

/** Of each grader of the table; somebody whom the model does not know grades like a newcomer. */
function ratesOf(model: RunModel, people: readonly number[]) {
  const known = new Map(model.graders.map((grader) => [grader.personId, grader]))
  return people.map((personId) => known.get(personId) ?? model.newcomer)
}

async function readStates(
  db: Kysely<DB>,
  { campaignId, newestCandidateId: upTo, newestSheetMarkId }: RunBounds & { campaignId: number },
): Promise<{ states: Map<number, CandidateForWhatIf>; notSentOn: Set<number> }> {
  const states = new Map<number, CandidateForWhatIf>()
  const notSentOn = new Set<number>()
  for (let after = 0; ; await nextTurn()) {
    const page = await listForWhatIf(db, { campaignId, after, upTo, limit: PAGE })
    for (const candidate of page) states.set(candidate.id, candidate)
    const last = page.at(-1)
    if (!last) return { states, notSentOn }
    const reasons = await readNotSentOn(db, { campaignId, newestSheetMarkId }, { from: page[0].id, to: last.id })
    for (const id of reasons.keys()) notSentOn.add(id)
    after = last.id
  }
}

function inOrder(tallies: CandidateTallies, order: readonly number[]): CandidateTallies {
  const { looks, grades, points, squaredPoints, evidence } = tallies
  return {
    looks: Uint16Array.from(order, (row) => looks[row]),
    grades: Uint16Array.from(order, (row) => grades[row]),
    points: Float64Array.from(order, (row) => points[row]),
    squaredPoints: Float64Array.from(order, (row) => squaredPoints[row]),
    evidence: Float64Array.from(order, (row) => evidence[row]),
  }
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
  return changeRule(db, permit, rule, triedAgainst)
}
