import 'server-only'
import { setImmediate as nextTurn } from 'node:timers/promises'
import type { Kysely } from 'kysely'
import { findNewestRun } from '@/db/queries/consensus'
import { listLeftOutNow } from '@/db/queries/left-out'
import { listEverGraders, type ReportInput } from '@/db/queries/reports'
import type { DB } from '@/db/schema'
import { fromJson } from '@/db/schema/values'
import { summariseGraders } from '@/lib/science/agreement/grader-summary'
import { ruleInForce } from '@/lib/work/campaigns/rule-in-force'
import { measureCalibration } from './calibration-report'
import { measureCampaign } from './campaign-agreement'
import { judgedGrades, measureDrift } from './drift'
import { readGradeSheet, type GradeSheet } from './grade-sheet'
import { placesOfGraders, reportOnGrader } from './grader-report'
import { countPerDay } from './grades-per-day'
import { fitLenses, type LensFit } from './lens-fit'
import { countPairs, measurePairs, type PairTables } from './pair-agreement'
import { measureProgress } from './progress'
import type { AgreementReport, GraderReport } from './report-types'
import { measureScore } from './score-report'

/** A report before it is told to anybody: without names, and without what depends on the minute. */
export interface ComputedReport extends Omit<AgreementReport, 'graders' | 'alerts'> {
  personIds: number[]
  isOut: boolean[]
  tables: PairTables
}

/** Reads and computes in turns of some tens of milliseconds; writes nothing. */
export async function computeReport(
  db: Kysely<DB>,
  campaignId: number,
  input: ReportInput,
  now: number,
): Promise<ComputedReport> {
  const [members, leftOut, run, rule] = [
    await listEverGraders(db, campaignId),
    await listLeftOutNow(db, campaignId),
    await findNewestRun(db, campaignId),
    await ruleInForce(db, campaignId),
  ]
  const outIds = new Set(leftOut.map(({ personId }) => personId))
  const sheet = await readGradeSheet(db, campaignId, members, input.newestGradeId)
  const isOut = members.map(({ personId }) => outIds.has(personId))
  // A run that counted other people than those who count now tells the rates of another consensus.
  const model = run?.model && run.newest_left_out_id === input.newestLeftOutId ? fromJson(run.model) : null
  const fit = await fitLenses(sheet, outIds, model)
  await nextTurn()
  const tables = await countPairs(sheet)
  const campaign = await measureCampaign(sheet, isOut)
  const pairs = await measurePairs(tables)
  const people = await reportOnPeople(sheet, fit, isOut)
  await nextTurn()
  const score = measureScore(sheet.candidates)
  await nextTurn()
  return {
    madeAt: new Date(now).toISOString(),
    personIds: members.map(({ personId }) => personId),
    isOut,
    tables,
    progress: measureProgress(sheet, rule, now),
    fit: { source: fit.source, converged: fit.converged, lensShare: fit.lensShare },
    campaign,
    pairs,
    people,
    calibration: measureCalibration(sheet, fit, isOut),
    score,
    days: countPerDay(sheet),
  }
}

async function reportOnPeople(sheet: GradeSheet, fit: LensFit, isOut: readonly boolean[]): Promise<GraderReport[]> {
  const places = placesOfGraders(sheet)
  const summaries = summariseGraders(fit.fit)
  const people: GraderReport[] = []
  for (const [grader, summary] of summaries.entries()) {
    await nextTurn()
    const place = { from: places[grader], to: places[grader + 1] }
    const drift = measureDrift(judgedGrades(sheet, fit, grader, isOut[grader], place))
    people.push(reportOnGrader(sheet, place, summary, drift))
  }
  return people
}
