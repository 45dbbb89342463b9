/** What a rule would make of all candidates, beside what they are now: for thresholds that are being tried. */
import { LENS, NOT_A_LENS } from '@/lib/science/agreement/lens-model'
import { meanRuleProblems, type Outcome } from '@/lib/science/agreement/mean-rule'
import { OUTCOMES, outcomesByMean, outcomesByReliability } from '@/lib/science/agreement/outcomes-at-once'
import { reliabilityRuleProblems } from '@/lib/science/agreement/reliability-rule'
import {
  promisedQuality,
  ruleQuality,
  type CalibrationCounts,
  type RuleQuality,
} from '@/lib/science/agreement/rule-quality'
import type { RuleInput } from '@/lib/work/campaigns/rule-input'
import type { WhatIfColumns } from './what-if-columns'

const CONFIRMED = OUTCOMES.indexOf('confirmed')

export interface Move {
  from: Outcome
  to: Outcome
  /** rows of the columns, the likeliest lens first */
  rows: number[]
}

export interface RuleTrial {
  /** states of the candidates, calibration stamps not counted */
  now: Record<Outcome, number>
  then: Record<Outcome, number>
  changed: number
  /** the most populous first */
  moves: Move[]
  /** candidates that keep their ruling though the rule would have it otherwise */
  heldByRuling: number
  stamps: StampQuality
  /** null where nothing is known of the reliabilities */
  promised: { completeness: number | null; purity: number | null } | null
}

export interface StampQuality {
  /** of the calibration stamps with at least the rule's least number of grades */
  counts: CalibrationCounts
  /** calibration stamps with fewer grades, which tell nothing yet */
  waiting: number
  /** null without a stamp that tells anything, or where the share of lenses is not known */
  quality: RuleQuality | null
}

/** One sentence each; empty when the rule can be tried. */
export function ruleProblems(rule: RuleInput): string[] {
  return rule.method === 'mean'
    ? meanRuleProblems(rule)
    : reliabilityRuleProblems({ ...rule, mostLooks: rule.gradesWanted })
}

/** Code of each row's outcome, before any ruling. @throws RangeError with the first of ruleProblems. */
export function outcomesOf({ tallies }: WhatIfColumns, rule: RuleInput): Uint8Array {
  return rule.method === 'mean'
    ? outcomesByMean(tallies, rule)
    : outcomesByReliability(tallies, { ...rule, mostLooks: rule.gradesWanted })
}

/** Cost O(rows), but for the sorting of those that change. @throws RangeError with the first of ruleProblems. */
export function tryRule(columns: WhatIfColumns, rule: RuleInput): RuleTrial {
  const outcomes = outcomesOf(columns, rule)
  const { candidates, state, ruled, probabilities, about } = columns
  const now = [0, 0, 0, 0]
  const then = [0, 0, 0, 0]
  const moved = new Map<number, number[]>()
  let changed = 0
  let heldByRuling = 0
  for (let row = 0; row < candidates; row++) {
    const before = state[row]
    const after = ruled[row] ? before : outcomes[row]
    if (after !== outcomes[row]) heldByRuling += 1
    now[before] += 1
    then[after] += 1
    if (before === after) continue
    changed += 1
    const key = before * OUTCOMES.length + after
    const rows = moved.get(key)
    if (rows) rows.push(row)
    else moved.set(key, [row])
  }
  const moves = [...moved].map(([key, rows]) => ({
    from: OUTCOMES[Math.floor(key / OUTCOMES.length)],
    to: OUTCOMES[key % OUTCOMES.length],
    rows: rows.sort((a, b) => probabilities[b] - probabilities[a] || a - b),
  }))
  return {
    now: named(now),
    then: named(then),
    changed,
    moves: moves.sort((a, b) => b.rows.length - a.rows.length),
    heldByRuling,
    stamps: stampQuality(columns, rule.leastGrades, (row) => outcomes[row] === CONFIRMED),
    promised:
      about.lensShare === null
        ? null
        : promisedQuality(probabilities.subarray(0, candidates), (row) => outcomes[row] === CONFIRMED),
  }
}

function named(counts: number[]): Record<Outcome, number> {
  const [open, split, confirmed, setAside] = counts
  return { open, split, confirmed, 'set aside': setAside }
}

export function stampQuality(
  { candidates, truth, tallies, about }: WhatIfColumns,
  leastGrades: number,
  isConfirmed: (row: number) => boolean,
): StampQuality {
  const counts: CalibrationCounts = { lenses: 0, lensesConfirmed: 0, nonLenses: 0, nonLensesConfirmed: 0 }
  let waiting = 0
  for (let row = candidates; row < truth.length; row++) {
    if (tallies.grades[row] < leastGrades) {
      waiting += 1
      continue
    }
    const confirmed = isConfirmed(row) ? 1 : 0
    if (truth[row] === LENS) {
      counts.lenses += 1
      counts.lensesConfirmed += confirmed
    } else if (truth[row] === NOT_A_LENS) {
      counts.nonLenses += 1
      counts.nonLensesConfirmed += confirmed
    }
  }
  const known = counts.lenses + counts.nonLenses > 0 && about.lensShare !== null
  return { counts, waiting, quality: known ? ruleQuality(counts, about.lensShare as number) : null }
}
