/** Which of the candidates in reach a grader should see next under the reliability method. Pure. */
import type { GraderRates } from '@/lib/science/agreement/lens-model'
import { chanceToSettle } from '@/lib/science/agreement/next-look'
import type { Boundaries } from '@/lib/science/agreement/sequential-test'

export interface LookInReach {
  /** sum of weights of the grades so far */
  evidence: number
  /** of a lens, after them */
  probability: number
  /** grades, without 'cannot judge' */
  grades: number
  /** other people who hold it on their benches */
  heldByOthers: number
}

export interface Chooser {
  own: GraderRates
  /** everybody whose grades count; the asking grader may be among them */
  everybody: readonly GraderRates[]
  boundaries: Boundaries
  leastGrades: number
}

/**
 * The `count` of them to be looked at by this grader, best first: those that nobody else holds, since a look that is under way may
 * settle a candidate; among these the ones that a look of this grader settles likelier than a look of whoever comes; among equals
 * in the order given, which is that of what a look tells.
 */
export function chooseLooks<T extends LookInReach>(inReach: readonly T[], chooser: Chooser, count: number): T[] {
  const gains = new Map<string, number>()
  const gainOf = (look: T) => {
    if (look.grades + 1 < chooser.leastGrades) return 0
    const key = `${look.evidence} ${look.probability}`
    const known = gains.get(key)
    if (known !== undefined) return known
    const gain = gainAt(look, chooser)
    gains.set(key, gain)
    return gain
  }
  return inReach
    .map((look, at) => ({ look, at, gain: gainOf(look) }))
    .sort((a, b) => a.look.heldByOthers - b.look.heldByOthers || b.gain - a.gain || a.at - b.at)
    .slice(0, count)
    .map(({ look }) => look)
}

/** Chance that the grader's look settles it, less the mean chance of everybody's. */
function gainAt({ evidence, probability }: LookInReach, { own, everybody, boundaries }: Chooser): number {
  if (everybody.length === 0) return 0
  const chance = (rates: GraderRates) => chanceToSettle(evidence, probability, rates, boundaries)
  return chance(own) - everybody.reduce((sum, rates) => sum + chance(rates), 0) / everybody.length
}
