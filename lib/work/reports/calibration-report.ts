import { calibrationCurve } from '@/lib/science/agreement/calibration-curve'
import { UNKNOWN_TRUTH } from '@/lib/science/agreement/dawid-skene-options'
import { CANNOT_JUDGE } from '@/lib/science/agreement/grade-table'
import { LENS } from '@/lib/science/agreement/lens-model'
import { logOddsOf, probabilityOf } from '@/lib/science/agreement/posterior'
import { weightWithoutItself } from '@/lib/science/agreement/weight-without-itself'
import type { GradeSheet } from './grade-sheet'
import type { LensFit } from './lens-fit'
import type { CalibrationReport } from './report-types'

/** Fewer, wider bins for few stamps, so that a bin has some. Our choice, no source. */
const binsFor = (stamps: number) => (stamps < 100 ? 5 : 10)

/**
 * Whether lens probabilities mean what they say, on the calibration stamps that have a grade. Each stamp is judged by
 * reliabilities without its own grades: its truth taught them, and judging it by them would flatter. The probability before any
 * grade is the share of lenses among these stamps, because stamps are chosen, not drawn from the search.
 */
export function measureCalibration(sheet: GradeSheet, fit: LensFit, isOut: readonly boolean[]): CalibrationReport {
  const stamps = sheet.candidates.filter(({ truth }) => truth !== null)
  const evidence = evidenceWithoutItself(sheet, fit, isOut)
  const graded = [...evidence.keys()]
  const truths = graded.map((candidate) => sheet.truth[candidate] === LENS)
  const lenses = truths.filter(Boolean).length
  const counts = {
    stamps: stamps.length,
    lensStamps: stamps.filter(({ truth }) => truth === 'lens').length,
    graded: graded.length,
  }
  if (lenses === 0 || lenses === graded.length) {
    return {
      ...counts,
      prior: null,
      bins: [],
      brierScore: null,
      baseBrierScore: null,
      expectedCalibrationError: null,
    }
  }
  const prior = lenses / graded.length
  const probabilities = graded.map((candidate) => probabilityOf(logOddsOf(prior) + evidence.get(candidate)!))
  const curve = calibrationCurve(probabilities, truths, { bins: binsFor(graded.length) })
  return {
    ...counts,
    prior,
    bins: curve.bins,
    brierScore: curve.brierScore,
    baseBrierScore: prior * (1 - prior),
    expectedCalibrationError: curve.expectedCalibrationError,
  }
}

/** Sum of the weights of each graded stamp, every grade weighed by its grader's counts less that grade itself. */
function evidenceWithoutItself(sheet: GradeSheet, { fit }: LensFit, isOut: readonly boolean[]): Map<number, number> {
  const evidence = new Map<number, number>()
  for (let at = 0; at < sheet.answers; at++) {
    const candidate = sheet.candidateOf[at]
    const grade = sheet.gradeOf[at]
    const grader = sheet.graderOf[at]
    const truth = sheet.truth[candidate]
    if (truth === UNKNOWN_TRUTH || !sheet.counts[at] || grade === CANNOT_JUDGE || isOut[grader]) continue
    const weight = weightWithoutItself(fit.counts, { grader, grade, truth })
    evidence.set(candidate, (evidence.get(candidate) ?? 0) + weight)
  }
  return evidence
}
