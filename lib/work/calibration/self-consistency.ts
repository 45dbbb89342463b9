/** How far a person agrees with themselves on candidates that came back turned. Pure. */
import type { GradeLetter } from '@/db/schema/grading'
import { cohenKappa } from '@/lib/science/agreement/cohen-kappa'
import { rateOf, type Rate } from './confusion'

export interface SelfConsistency {
  /** Pairs of two grades; with 'cannot judge' there is nothing to compare. */
  pairs: number
  /** The same letter both times, and at most one letter apart. */
  same: Rate
  near: Rate
  /** Cohen's, with squared weights, as disagreement by two letters is worse than by one; null where it is undefined. */
  kappa: number | null
}

const LADDER = ['A', 'B', 'C', 'N'] as const

export function selfConsistency(pairs: readonly { first: GradeLetter; again: GradeLetter }[]): SelfConsistency {
  const table = LADDER.map(() => LADDER.map(() => 0))
  let [judged, same, near] = [0, 0, 0]
  for (const { first, again } of pairs) {
    const [from, to] = [first, again].map((letter) => LADDER.findIndex((rung) => rung === letter))
    if (from < 0 || to < 0) continue
    judged++
    table[from][to]++
    if (from === to) same++
    if (Math.abs(from - to) <= 1) near++
  }
  const { kappa } = cohenKappa(table, 'quadratic')
  return { pairs: judged, same: rateOf(same, judged), near: rateOf(near, judged), kappa }
}
