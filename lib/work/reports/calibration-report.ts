import { calibrationCurve } from '@/lib/science/agreement/calibration-curve'
import { UNKNOWN_TRUTH } from '@/lib/science/agreement/dawid-skene-options'
import { CANNOT_JUDGE } from '@/lib/science/agreement/grade-table'
import { LENS, LENS_PSEUDO_COUNTS } from '@/lib/science/agreement/lens-model'
import { logOddsOf, probabilityOf } from '@/lib/science/agreement/posterior'
import type { GradeSheet } from './grade-sheet'
import type { LensFit } from './lens-fit'
import type { CalibrationReport } from './report-types'

const GRADES = 4
const CLASSES = 2
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
function evidenceWithoutItself(sheet: GradeSheet, fit: LensFit, isOut: readonly boolean[]): Map<number, number> {
  const evidence = new Map<number, number>()
  const totals = rowTotals(fit)
  for (let at = 0; at < sheet.answers; at++) {
    const candidate = sheet.candidateOf[at]
    const grade = sheet.gradeOf[at]
    const known = sheet.truth[candidate]
    if (known === UNKNOWN_TRUTH || !sheet.counts[at] || grade === CANNOT_JUDGE || isOut[sheet.graderOf[at]]) continue
    const logRate = (c: number) => {
      const row = sheet.graderOf[at] * CLASSES + c
      const own = known === c ? 1 : 0
      const count = fit.fit.counts[row * GRADES + grade] + LENS_PSEUDO_COUNTS[c * GRADES + grade] - own
      return Math.log(count / (totals[row] - own))
    }
    evidence.set(candidate, (evidence.get(candidate) ?? 0) + logRate(0) - logRate(1))
  }
  return evidence
}

function rowTotals({ fit }: LensFit): Float64Array {
  const totals = new Float64Array(fit.graders * CLASSES)
  for (let at = 0; at < fit.counts.length; at++) {
    totals[Math.floor(at / GRADES)] += fit.counts[at] + LENS_PSEUDO_COUNTS[at % (CLASSES * GRADES)]
  }
  return totals
}
