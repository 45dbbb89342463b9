/**
 * Grades as flat typed arrays, one entry a grade, and the same grouped by candidate: 9 bytes a grade grouped from 7 to 9,
 * so that 5,000,000 grades take less than 100 MB together.
 */
import { GRADES, type Answer } from '@/lib/science/agreement/grades'

/** Code of 'cannot judge': it is left out of every model. */
export const CANNOT_JUDGE = 255

export interface FlatGrades {
  /** candidates are numbered 0 to candidates - 1; one without a grade is allowed */
  candidates: number
  /** graders are numbered 0 to graders - 1 */
  graders: number
  /** how many grades there are, coded 0 to grades - 1 in order; at most 255 */
  grades: number
  /** candidate, grader and grade of each entry: three arrays of one length. A grader may grade a candidate twice. */
  candidateOf: Int32Array | Uint32Array
  graderOf: Int32Array | Uint32Array | Uint16Array
  /** grade, or CANNOT_JUDGE */
  gradeOf: Uint8Array
}

/** Entries of candidate i are those from start[i] to start[i + 1], in the order in which they stood. */
export interface GradesByCandidate {
  candidates: number
  graders: number
  grades: number
  start: Int32Array
  /** grader * grades + grade */
  cell: Int32Array
}

/** Code of an answer among the four grades: A 0, B 1, C 2, N 3. */
export function gradeCode(answer: Answer): number {
  return answer === 'U' ? CANNOT_JUDGE : GRADES.indexOf(answer)
}

/**
 * Groups grades by candidate with a counting sort, leaving out 'cannot judge'. Cost O(grades + candidates).
 * @throws RangeError when the arrays differ in length, or an index or a grade is outside its range.
 */
export function groupByCandidate(flat: FlatGrades): GradesByCandidate {
  const { candidates, graders, grades, candidateOf, graderOf, gradeOf } = flat
  checkSizes(flat)
  const start = new Int32Array(candidates + 1)
  for (let entry = 0; entry < gradeOf.length; entry++) {
    if (gradeOf[entry] === CANNOT_JUDGE) continue
    if (!(candidateOf[entry] < candidates && candidateOf[entry] >= 0))
      refuse('candidate', entry, candidateOf, candidates)
    if (!(graderOf[entry] < graders && graderOf[entry] >= 0)) refuse('grader', entry, graderOf, graders)
    if (gradeOf[entry] >= grades) refuse('grade', entry, gradeOf, grades)
    start[candidateOf[entry] + 1] += 1
  }
  for (let candidate = 0; candidate < candidates; candidate++) start[candidate + 1] += start[candidate]
  const cell = new Int32Array(start[candidates])
  const next = start.slice()
  for (let entry = 0; entry < gradeOf.length; entry++) {
    if (gradeOf[entry] === CANNOT_JUDGE) continue
    cell[next[candidateOf[entry]]++] = graderOf[entry] * grades + gradeOf[entry]
  }
  return { candidates, graders, grades, start, cell }
}

function checkSizes({ candidates, graders, grades, candidateOf, graderOf, gradeOf }: FlatGrades): void {
  if (candidateOf.length !== gradeOf.length || graderOf.length !== gradeOf.length) {
    throw new RangeError(
      `There are ${candidateOf.length} candidates, ${graderOf.length} graders and ${gradeOf.length} grades in the three ` +
        'arrays; they must have one length.',
    )
  }
  const isCount = (value: number) => Number.isSafeInteger(value) && value >= 0
  if (!isCount(candidates) || !isCount(graders)) {
    throw new RangeError('The numbers of candidates and graders must be whole numbers from 0 up.')
  }
  if (!isCount(grades) || grades < 1 || grades > 255) throw new RangeError('There must be from 1 to 255 grades.')
}

function refuse(what: string, entry: number, values: ArrayLike<number>, count: number): never {
  throw new RangeError(`Entry ${entry} has the ${what} ${values[entry]}; there are ${count}, numbered from 0.`)
}
