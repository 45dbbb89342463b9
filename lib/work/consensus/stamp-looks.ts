/** What each look at a calibration stamp weighs, in the order in which they were given. Pure. */
import type { StampAnswer } from '@/db/queries/what-if'
import { UNKNOWN_TRUTH } from '@/lib/science/agreement/dawid-skene-options'
import { CANNOT_JUDGE, gradeCode } from '@/lib/science/agreement/grade-table'
import { LENS, NOT_A_LENS } from '@/lib/science/agreement/lens-model'
import { logOddsOf, probabilityOf } from '@/lib/science/agreement/posterior'
import type { LookSeries } from '@/lib/science/agreement/replay-looks'
import { weightWithoutItself } from '@/lib/science/agreement/weight-without-itself'
import type { RunGrades } from './read-grades'

const CLASSES = 2

/**
 * Each grade is weighed by the counts of its grader less itself.
 * @param evidence of each row of `grades`, under the model that is asked.
 * @param rows of the stamps, in the order of the series. @param answers by candidate, in the order given.
 */
export function stampLooksOf(
  grades: RunGrades,
  { lensShare, evidence }: { lensShare: number; evidence: Float64Array },
  rows: readonly number[],
  answers: readonly StampAnswer[],
): LookSeries {
  const counts = countsOf(grades, lensShare, evidence)
  const numberOf = new Map(grades.people.map((personId, grader) => [personId, grader]))
  const answersOf = new Map<number, StampAnswer[]>(rows.map((row) => [grades.ids[row], []]))
  for (const answer of answers) answersOf.get(answer.candidateId)?.push(answer)
  const start = [0]
  const grade: number[] = []
  const weight: number[] = []
  for (const row of rows) {
    for (const answer of answersOf.get(grades.ids[row]) ?? []) {
      const code = gradeCode(answer.grade)
      const grader = numberOf.get(answer.personId)
      grade.push(code)
      // Whoever only ever could not judge is no grader of the table.
      weight.push(
        code === CANNOT_JUDGE || grader === undefined
          ? 0
          : weightWithoutItself(counts, { grader, grade: code, truth: grades.truth[row] }),
      )
    }
    start.push(grade.length)
  }
  return { start: Int32Array.from(start), grade: Uint8Array.from(grade), weight: Float64Array.from(weight) }
}

/** How often each grader met each class, as far as it is known, and gave each grade. */
function countsOf({ table, truth, people }: RunGrades, lensShare: number, evidence: Float64Array): Float64Array {
  const { start, cell, grades } = table
  const counts = new Float64Array(people.length * CLASSES * grades)
  const prior = logOddsOf(lensShare)
  for (let row = 0; row < table.candidates; row++) {
    const known = truth[row] !== UNKNOWN_TRUTH
    const lens = known ? Number(truth[row] === LENS) : probabilityOf(prior + evidence[row])
    for (let entry = start[row]; entry < start[row + 1]; entry++) {
      const at = Math.floor(cell[entry] / grades) * CLASSES * grades + (cell[entry] % grades)
      counts[at + LENS * grades] += lens
      counts[at + NOT_A_LENS * grades] += 1 - lens
    }
  }
  return counts
}
