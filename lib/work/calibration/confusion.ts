/** Answers against truth, with intervals. Pure. */
import { wilsonInterval, type Interval } from '@/lib/science/agreement/binomial-intervals'
import type { GradeLetter } from '@/db/schema/grading'

export const LETTERS: readonly GradeLetter[] = ['A', 'B', 'C', 'N', 'U']

export interface Rate {
  /** Of so many, without 'cannot judge'. */
  of: number
  n: number
  share: number | null
  /** Wilson's at 95 %. */
  interval: Interval | null
}

export interface Confusion {
  /** By truth, in the order of LETTERS. */
  lens: number[]
  notLens: number[]
  /** Lenses graded A, B or C. */
  lensesSeen: Rate
  /** Non-lenses graded N. */
  othersSeen: Rate
  answers: number
}

export function confusionOf(
  rows: readonly { truth: 'lens' | 'not a lens'; grade: GradeLetter; n: number }[],
): Confusion {
  const row = (truth: 'lens' | 'not a lens') =>
    LETTERS.map((letter) =>
      rows.reduce((sum, one) => sum + (one.truth === truth && one.grade === letter ? one.n : 0), 0),
    )
  const [lens, notLens] = [row('lens'), row('not a lens')]
  const judged = (counts: readonly number[]) => counts.slice(0, 4).reduce((sum, n) => sum + n, 0)
  return {
    lens,
    notLens,
    lensesSeen: rateOf(lens[0] + lens[1] + lens[2], judged(lens)),
    othersSeen: rateOf(notLens[3], judged(notLens)),
    answers: rows.reduce((sum, { n }) => sum + n, 0),
  }
}

export const rateOf = (n: number, of: number): Rate => ({
  n,
  of,
  share: of === 0 ? null : n / of,
  interval: wilsonInterval(n, of),
})
