import { wilsonInterval } from '@/lib/science/agreement/binomial-intervals'
import { cohenKappa } from '@/lib/science/agreement/cohen-kappa'
import { UNKNOWN_TRUTH } from '@/lib/science/agreement/dawid-skene-options'
import { CANNOT_JUDGE } from '@/lib/science/agreement/grade-table'
import type { GraderSummary } from '@/lib/science/agreement/grader-summary'
import { GRADES } from '@/lib/science/agreement/grades'
import type { GradeSheet } from './grade-sheet'
import { findQuickStretch } from './quick-stretch'
import type { Drift, GraderReport } from './report-types'

/** Places of each grader's answers in the sheet: from start[grader] to start[grader + 1]. */
export function placesOfGraders(sheet: GradeSheet): Int32Array {
  const start = new Int32Array(sheet.graders.length + 1)
  for (let at = 0; at < sheet.answers; at++) start[sheet.graderOf[at] + 1] += 1
  for (let grader = 0; grader < sheet.graders.length; grader++) start[grader + 1] += start[grader]
  return start
}

/** What one grader's answers tell of them. @param from, to places of their answers in the sheet. */
export function reportOnGrader(
  sheet: GradeSheet,
  { from, to }: { from: number; to: number },
  summary: GraderSummary,
  drift: Drift,
): GraderReport {
  const given = [0, 0, 0, 0]
  let cannotJudge = 0
  let calibrationGrades = 0
  const seconds: number[] = []
  for (let at = from; at < to; at++) {
    if (sheet.isLook[at] && sheet.seconds[at] >= 0) seconds.push(sheet.seconds[at])
    if (!sheet.counts[at]) continue
    if (sheet.gradeOf[at] === CANNOT_JUDGE) cannotJudge += 1
    else given[sheet.gradeOf[at]] += 1
    if (sheet.gradeOf[at] !== CANNOT_JUDGE && sheet.truth[sheet.candidateOf[at]] !== UNKNOWN_TRUTH)
      calibrationGrades += 1
  }
  const { lensesSeen, nonLensesSeen, lenses, nonLenses, bitsPerLook, weights } = summary
  return {
    grades: given.reduce((sum, count) => sum + count, 0),
    cannotJudge,
    calibrationGrades,
    medianSeconds: medianOf(seconds),
    lensesSeen,
    nonLensesSeen,
    lenses,
    nonLenses,
    bitsPerLook,
    letters: GRADES.map((grade, code) => ({ grade, given: given[code], weight: weights[code] })),
    consistency: consistencyOf(sheet, from, to),
    quickStretch: findQuickStretch(sheet, from, to),
    drift,
  }
}

export function medianOf(values: readonly number[]): number | null {
  if (values.length === 0) return null
  const sorted = Float64Array.from(values).sort()
  const middle = sorted.length >> 1
  return sorted.length % 2 === 1 ? sorted[middle] : (sorted[middle - 1] + sorted[middle]) / 2
}

/** Each repeat beside the person's counted grade of the same candidate; 'cannot judge' on either side is left out. */
function consistencyOf(sheet: GradeSheet, from: number, to: number): GraderReport['consistency'] {
  const gradeOf = new Map<number, number>()
  for (let at = from; at < to; at++) if (sheet.counts[at]) gradeOf.set(sheet.candidateOf[at], sheet.gradeOf[at])
  const table = GRADES.map(() => GRADES.map(() => 0))
  let pairs = 0
  let same = 0
  for (let at = from; at < to; at++) {
    const first = gradeOf.get(sheet.candidateOf[at])
    const again = sheet.gradeOf[at]
    if (!sheet.repeats[at] || first === undefined || first === CANNOT_JUDGE || again === CANNOT_JUDGE) continue
    table[first][again] += 1
    pairs += 1
    if (first === again) same += 1
  }
  const interval = wilsonInterval(same, pairs)
  if (!interval) return null
  return { pairs, same: { value: same / pairs, interval }, quadratic: cohenKappa(table, 'quadratic').kappa }
}
