import { UNKNOWN_TRUTH } from '@/lib/science/agreement/dawid-skene-options'
import { CANNOT_JUDGE, type FlatGrades } from '@/lib/science/agreement/grade-table'
import type { GradeSheet } from './grade-sheet'

/** The grades that count, of candidates of the search: no calibration stamps, no repeats, nothing that was corrected. */
export function searchGrades(sheet: GradeSheet, isOut: readonly boolean[] = []): FlatGrades {
  return {
    candidates: sheet.candidates.length,
    graders: sheet.graders.length,
    grades: 4,
    candidateOf: sheet.candidateOf,
    graderOf: sheet.graderOf,
    gradeOf: Uint8Array.from(sheet.gradeOf, (grade, at) =>
      sheet.counts[at] && sheet.truth[sheet.candidateOf[at]] === UNKNOWN_TRUTH && !isOut[sheet.graderOf[at]]
        ? grade
        : CANNOT_JUDGE,
    ),
  }
}
