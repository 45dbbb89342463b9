/** What a rule would make of all candidates, beside what they are now: for thresholds that are being tried. */
import { LENS } from '@/lib/science/agreement/lens-model'
import { meanRuleProblems, type Outcome } from '@/lib/science/agreement/mean-rule'
import { OUTCOMES, outcomesByMean, outcomesByReliability } from '@/lib/science/agreement/outcomes-at-once'
import { reliabilityRuleProblems } from '@/lib/science/agreement/reliability-rule'
import { replayByMean, replayByReliability, type ReplayedLooks } from '@/lib/science/agreement/replay-looks'
import {
  promisedQuality,
  ruleQuality,
  type CalibrationCounts,
  type RuleQuality,
} from '@/lib/science/agreement/rule-quality'
import { SUM_SLACK, waldBoundaries } from '@/lib/science/agreement/sequential-test'
import type { RuleInput } from '@/lib/work/campaigns/rule-input'
import { isDropped, type WhatIfColumns } from './what-if-columns'

const CONFIRMED = OUTCOMES.indexOf('confirmed')
const SET_ASIDE = OUTCOMES.indexOf('set aside')

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
  /** candidates that the first pass has set aside by itself, which no rule changes */
  dropped: number
  /** of what came to the bench; null where nothing is known of the reliabilities */
  promised: { completeness: number | null; purity: number | null } | null
}

export interface StampQuality {
  /** of the calibration stamps that the rule would have stopped by now, each judged as of the look at which it would have */
  counts: CalibrationCounts
  /** calibration stamps that want more looks, which tell nothing yet */
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
export function outcomesOf(columns: WhatIfColumns, rule: RuleInput): Uint8Array {
  const { tallies, notSentOn } = columns
  const outcomes =
    rule.method === 'mean'
      ? outcomesByMean(tallies, rule)
      : outcomesByReliability(tallies, { ...rule, mostLooks: rule.gradesWanted })
  for (let row = 0; row < notSentOn.length; row++) if (isDropped(columns, row)) outcomes[row] = SET_ASIDE
  return outcomes
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
  let dropped = 0
  const benched: number[] = []
  for (let row = 0; row < candidates; row++) {
    const before = state[row]
    const after = ruled[row] ? before : outcomes[row]
    if (after !== outcomes[row]) heldByRuling += 1
    if (isDropped(columns, row)) dropped += 1
    else benched.push(row)
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
    dropped,
    stamps: stampQuality(columns, rule),
    promised:
      about.lensShare === null
        ? null
        : promisedQuality(
            Float64Array.from(benched, (row) => probabilities[row]),
            (at) => outcomes[benched[at]] === CONFIRMED,
          ),
  }
}

function named(counts: number[]): Record<Outcome, number> {
  const [open, split, confirmed, setAside] = counts
  return { open, split, confirmed, 'set aside': setAside }
}

/** How far each calibration stamp came under the rule, look by look. @throws RangeError with the first of ruleProblems. */
export function replayStamps({ stampLooks }: WhatIfColumns, rule: RuleInput): ReplayedLooks {
  return rule.method === 'mean'
    ? replayByMean(stampLooks, rule)
    : replayByReliability(stampLooks, { ...rule, mostLooks: rule.gradesWanted })
}

/** Threshold from which the rule confirms: mean points, or evidence. */
export const confirmsFrom = (rule: RuleInput): number =>
  rule.method === 'mean' ? rule.confirmMean : waldBoundaries(rule).upper - SUM_SLACK

function stampQuality(columns: WhatIfColumns, rule: RuleInput): StampQuality {
  const { candidates, truth, about } = columns
  const { reach, ended } = replayStamps(columns, rule)
  const threshold = confirmsFrom(rule)
  const counts: CalibrationCounts = { lenses: 0, lensesConfirmed: 0, nonLenses: 0, nonLensesConfirmed: 0 }
  let waiting = 0
  for (let stamp = 0; stamp < ended.length; stamp++) {
    const confirmed = reach[stamp] >= threshold ? 1 : 0
    if (!confirmed && !ended[stamp]) {
      waiting += 1
    } else if (truth[candidates + stamp] === LENS) {
      counts.lenses += 1
      counts.lensesConfirmed += confirmed
    } else {
      counts.nonLenses += 1
      counts.nonLensesConfirmed += confirmed
    }
  }
  const known = counts.lenses + counts.nonLenses > 0 && about.lensShare !== null
  return { counts, waiting, quality: known ? ruleQuality(counts, about.lensShare as number) : null }
}
