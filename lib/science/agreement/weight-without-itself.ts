/**
 * What a grade of a candidate of known class weighs without what it taught itself: its truth is in the counts of its grader, and
 * judging it by them would flatter.
 */
import { GRADES } from '@/lib/science/agreement/grades'
import { LENS, LENS_PSEUDO_COUNTS, NOT_A_LENS } from '@/lib/science/agreement/lens-model'

const CLASSES = 2

/**
 * Natural log of the likelihood ratio of the grade, from the grader's counts less this one, with the pseudo-counts of the model.
 * That other graders' counts and the share of lenses would move a little too is passed over.
 * @param counts laid out grader, class, grade, without pseudo-counts; this grade is in them as a whole one of its class.
 * @param truth LENS or NOT_A_LENS. @param grade 0 to 3.
 */
export function weightWithoutItself(
  counts: ArrayLike<number>,
  { grader, grade, truth }: { grader: number; grade: number; truth: number },
): number {
  const logRate = (c: number) => {
    const row = (grader * CLASSES + c) * GRADES.length
    const own = truth === c ? 1 : 0
    let all = -own
    for (let g = 0; g < GRADES.length; g++) all += counts[row + g] + LENS_PSEUDO_COUNTS[c * GRADES.length + g]
    return Math.log((counts[row + grade] + LENS_PSEUDO_COUNTS[c * GRADES.length + grade] - own) / all)
  }
  return logRate(LENS) - logRate(NOT_A_LENS)
}
