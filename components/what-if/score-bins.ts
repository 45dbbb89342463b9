/** How many candidates that came to the bench lie where on the scale of a rule, for a small histogram beside its thresholds. */
import { probabilityOf, logOddsOf } from '@/lib/science/agreement/posterior'
import { waldBoundaries } from '@/lib/science/agreement/sequential-test'
import type { RuleInput } from '@/lib/work/campaigns/rule-input'
import { scoreOf } from '@/lib/work/consensus/quality-curve'
import { isDropped, type WhatIfColumns } from '@/lib/work/consensus/what-if-columns'

export interface ScoreBins {
  /** mean points, or evidence */
  low: number
  high: number
  counts: Uint32Array
  /** candidates with too few grades, and those that spread too far: they are in no bin */
  tooFew: number
  spread: number
  /** on the same scale */
  confirmFrom: number
  setAsideTo: number
}

const BINS = { mean: 30, reliability: 48 } as const
const MOST_EVIDENCE = 12

/** Cost O(candidates). The rule must be one that can be tried. */
export function scoreBins(columns: WhatIfColumns, rule: RuleInput): ScoreBins {
  const { candidates, tallies } = columns
  const [low, high] = rule.method === 'mean' ? [0, 3] : [-MOST_EVIDENCE, MOST_EVIDENCE]
  const bins = BINS[rule.method]
  const counts = new Uint32Array(bins)
  let tooFew = 0
  let spread = 0
  for (let row = 0; row < candidates; row++) {
    if (isDropped(columns, row)) continue
    const n = tallies.grades[row]
    if (n < rule.leastGrades) {
      tooFew += 1
      continue
    }
    const score = scoreOf(tallies, rule, row, n)
    if (Number.isNaN(score)) {
      spread += 1
      continue
    }
    const bin = Math.floor(((score - low) / (high - low)) * bins + 1e-9)
    counts[Math.min(bins - 1, Math.max(0, bin))] += 1
  }
  return { low, high, counts, tooFew, spread, ...thresholdsOf(rule) }
}

function thresholdsOf(rule: RuleInput): { confirmFrom: number; setAsideTo: number } {
  if (rule.method === 'mean') return { confirmFrom: rule.confirmMean, setAsideTo: rule.setAsideMean }
  const { upper, lower } = waldBoundaries(rule)
  return { confirmFrom: upper, setAsideTo: lower }
}

/** A place on the scale in words: points, or the lens probability that the evidence comes to. */
export function placeInWords(value: number, rule: RuleInput, lensShare: number | null): string {
  if (rule.method === 'mean' || lensShare === null) return value.toFixed(2)
  const p = probabilityOf(logOddsOf(lensShare) + value)
  return p < 0.001 || p > 0.999 ? `${(100 * p).toFixed(3)} %` : `${(100 * p).toFixed(1)} %`
}
