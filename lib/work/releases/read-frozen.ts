import 'server-only'
import type { Kysely } from 'kysely'
import { listLeftOutPeople, listPseudonyms } from '@/db/queries/consensus'
import { countCalibration, listFrozen, listReleasedGrades, type FrozenCandidate } from '@/db/queries/release-making'
import { listFrozenMerges } from '@/db/queries/release-beside'
import type { ReleaseRow } from '@/db/queries/releases'
import type { DB } from '@/db/schema'
import { fromJson, type Json } from '@/db/schema/values'
import { giveWay } from '@/lib/platform/jobs/give-way'
import { GRADES, type Answer } from '@/lib/science/agreement/grades'
import type { RuleInForce } from '@/lib/work/campaigns/rule-in-force'
import { judgeByPass, readNotSentOn } from '@/lib/work/consensus/not-sent-on'
import type { Judged } from '@/lib/work/consensus/judge'
import { emptyCounts, judgeReleased, ReleasedGrades, type ReleasedJudge } from './judge-released'
import { whatCounts, type ReleasedAnswer } from './what-counts'

export const PAGE = 500

export interface ReleasedGrader {
  pseudonym: string
  leftOut: boolean
  /** Of candidates: looks that count, how many of them could not judge, and looks that do not count. */
  counted: number
  cannotJudge: number
  notCounted: number
  /** Grades of calibration stamps by their truth, 'cannot judge' left out. */
  calibration: { lens: Record<string, number>; notLens: Record<string, number> }
}

export interface Frozen {
  release: ReleaseRow
  rule: RuleInForce
  leftOut: ReadonlySet<number>
  /** By pseudonym. */
  graders: ReleasedGrader[]
  judged: ReleasedJudge
}

/** A judged candidate as the release says it. */
export interface ReleasedCandidate extends FrozenCandidate {
  verdict: Judged['judgement']
  verdictReason: string
  notSentOn: boolean
  answers: ReleasedAnswer[]
  /** The newest ruling where it decides. */
  ruled: boolean
  /** Name of the candidate that it is the same object as. */
  mergedInto: string | null
}

export const releaseBounds = (release: ReleaseRow) => ({
  id: release.id,
  campaignId: release.campaign_id,
  createdAt: release.created_at,
})

/** Reads what was frozen once, as flat arrays, and judges it. */
export async function readFrozen(db: Kysely<DB>, release: ReleaseRow): Promise<Frozen> {
  const campaignId = release.campaign_id
  const rule = fromJson(release.rule as Json<RuleInForce>)
  const leftOut = new Set(await listLeftOutPeople(db, campaignId, release.newest_left_out_id))
  const graders = await listGraders(db, release, leftOut)
  const grades = new ReleasedGrades(graders.map(({ pseudonym }) => pseudonym))
  for await (const page of pagesOf(db, release, leftOut)) {
    for (const { answers } of page) grades.add(countedOnly(answers))
  }
  const counts = graders.map(({ leftOut: isOut, calibration }) => {
    const row = (of: Record<string, number>) => GRADES.map((grade) => (isOut ? 0 : of[grade]))
    return { lens: row(calibration.lens), notLens: row(calibration.notLens) }
  })
  grades.addCalibration(counts)
  return { release, rule, leftOut, graders, judged: await judgeReleased(rule, grades) }
}

const countedOnly = (answers: readonly ReleasedAnswer[]): { by: string; grade: Answer }[] =>
  answers.filter(({ notCounted }) => notCounted === null)

async function listGraders(
  db: Kysely<DB>,
  release: ReleaseRow,
  leftOut: ReadonlySet<number>,
): Promise<ReleasedGrader[]> {
  const pseudonyms = await listPseudonyms(db, release.campaign_id)
  const graders = new Map<number, ReleasedGrader>()
  const graderOf = (personId: number): ReleasedGrader => {
    const known = graders.get(personId)
    if (known) return known
    const calibration = { lens: emptyCounts(), notLens: emptyCounts() }
    const pseudonym = pseudonyms.get(personId)
    if (!pseudonym) throw new Error(`Person ${personId} has graded and has no pseudonym in this campaign.`)
    const fresh = { pseudonym, leftOut: leftOut.has(personId), counted: 0, cannotJudge: 0, notCounted: 0, calibration }
    graders.set(personId, fresh)
    return fresh
  }
  if (release.kind !== 'retraction') {
    const bounds = {
      campaignId: release.campaign_id,
      newestGradeId: release.newest_grade_id,
      newestCandidateId: release.newest_candidate_id,
    }
    for (const { personId, truth, grade, count } of await countCalibration(db, bounds)) {
      const { calibration } = graderOf(personId)
      if (grade !== 'U') (truth === 'lens' ? calibration.lens : calibration.notLens)[grade] += count
    }
  }
  for await (const page of pagesOf(db, release, leftOut)) {
    for (const { personId, grade, notCounted } of page.flatMap(({ answers }) => answers)) {
      const grader = graderOf(personId)
      if (notCounted !== null) grader.notCounted += 1
      else if (grade === 'U') grader.cannotJudge += 1
      else grader.counted += 1
    }
  }
  return [...graders.values()].toSorted((a, b) => (a.pseudonym < b.pseudonym ? -1 : 1))
}

type WithAnswers = FrozenCandidate & { answers: ReleasedAnswer[] }

async function* pagesOf(
  db: Kysely<DB>,
  release: ReleaseRow,
  leftOut: ReadonlySet<number>,
): AsyncGenerator<WithAnswers[], void, void> {
  for (let after = 0; ; await giveWay()) {
    const page = await listFrozen(db, releaseBounds(release), { after, limit: PAGE })
    if (page.length === 0) return
    const ids = page.map((row) => row.candidate_id)
    after = ids[ids.length - 1]
    const grades = await listReleasedGrades(db, release.campaign_id, ids, release.newest_grade_id)
    yield withAnswers(page, whatCounts(grades, leftOut))
  }
}

function withAnswers(page: readonly FrozenCandidate[], answers: readonly ReleasedAnswer[]): WithAnswers[] {
  const byCandidate = new Map<number, ReleasedAnswer[]>(page.map((row) => [row.candidate_id, []]))
  for (const answer of answers) byCandidate.get(answer.candidateId)?.push(answer)
  return page.map((row) => ({ ...row, answers: byCandidate.get(row.candidate_id) ?? [] }))
}

/**
 * What the release says of each judged candidate, in order, a page at a time.
 * @throws Error where what was frozen and what its grades come to differ: nothing of such a release is published.
 */
export async function* releasedCandidates(
  db: Kysely<DB>,
  { release, leftOut, judged }: Frozen,
): AsyncGenerator<ReleasedCandidate[], void, void> {
  let row = 0
  for await (const page of pagesOf(db, release, leftOut)) {
    const range = { from: page[0].candidate_id, to: page[page.length - 1].candidate_id }
    const marks = { campaignId: release.campaign_id, newestSheetMarkId: release.newest_sheet_mark_id }
    const notSentOn = await readNotSentOn(db, marks, range)
    const merges = { campaignId: release.campaign_id, upTo: release.newest_merge_id }
    const mergedInto = await listFrozenMerges(
      db,
      merges,
      page.map((row) => row.candidate_id),
    )
    yield page.map((candidate) => {
      const reasonOfPass = notSentOn.get(candidate.candidate_id)
      const plain = judged.judge(row++)
      const unseen = plain.judgement.grades + plain.judgement.cannotJudge === 0
      const passedOver = unseen && reasonOfPass !== undefined
      const { judgement, reason } = passedOver ? judgeByPass(plain, reasonOfPass) : plain
      const ruled = candidate.rulingOutcome !== null && candidate.rulingOutcome !== 'by verdict'
      const expected = ruled ? candidate.rulingOutcome : judgement.outcome
      if (candidate.state !== expected) {
        throw new Error(
          `${candidate.name} was frozen as '${candidate.state}', and its grades and rulings come to '${expected}'.`,
        )
      }
      const kept = mergedInto.get(candidate.candidate_id) ?? null
      return {
        ...candidate,
        verdict: judgement,
        verdictReason: reason(),
        notSentOn: passedOver,
        ruled,
        mergedInto: kept,
      }
    })
  }
}
