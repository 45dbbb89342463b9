/** What each look at a calibration stamp weighs, in the order in which they were given. Pure. */
import type { StampAnswer } from '@/db/queries/what-if'
import { UNKNOWN_TRUTH } from '@/lib/science/agreement/dawid-skene-options'
import { CANNOT_JUDGE, gradeCode } from '@/lib/science/agreement/grade-table'
import { LENS, LENS_PSEUDO_COUNTS, NOT_A_LENS } from '@/lib/science/agreement/lens-model'
import { logOddsOf, probabilityOf } from '@/lib/science/agreement/posterior'
import type { LookSeries } from '@/lib/science/agreement/replay-looks'
import type { RunGrades } from './read-grades'

const GRADES = 4
const CLASSES = 2

/**
 * A stamp's truth taught the reliabilities, and weighing its grades by what they taught would flatter: each is weighed by the
 * counts of its grader less itself. That the share of lenses and other graders' rates would move a little too is passed over.
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
          : weightWithoutItself(counts, grader, code, grades.truth[row]),
      )
    }
    start.push(grade.length)
  }
  return { start: Int32Array.from(start), grade: Uint8Array.from(grade), weight: Float64Array.from(weight) }
}

/** How often each grader met each class, as far as it is known, and gave each grade, with the pseudo-counts of the model. */
function countsOf({ table, truth, people }: RunGrades, lensShare: number, evidence: Float64Array): Float64Array {
  const counts = Float64Array.from(
    { length: people.length * CLASSES * GRADES },
    (_, at) => LENS_PSEUDO_COUNTS[at % (CLASSES * GRADES)],
  )
  const prior = logOddsOf(lensShare)
  for (let row = 0; row < table.candidates; row++) {
    const known = truth[row] !== UNKNOWN_TRUTH
    const lens = known ? Number(truth[row] === LENS) : probabilityOf(prior + evidence[row])
    for (let entry = table.start[row]; entry < table.start[row + 1]; entry++) {
      const grader = Math.floor(table.cell[entry] / GRADES)
      const at = grader * CLASSES * GRADES + (table.cell[entry] % GRADES)
      counts[at + LENS * GRADES] += lens
      counts[at + NOT_A_LENS * GRADES] += 1 - lens
    }
  }
  return counts
}

function weightWithoutItself(counts: Float64Array, grader: number, grade: number, truth: number): number {
  const logRate = (c: number) => {
    const from = (grader * CLASSES + c) * GRADES
    const own = truth === c ? 1 : 0
    const all = counts.subarray(from, from + GRADES).reduce((sum, count) => sum + count, 0)
    return Math.log((counts[from + grade] - own) / (all - own))
  }
  return logRate(LENS) - logRate(NOT_A_LENS)
}
