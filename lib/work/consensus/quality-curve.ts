/**
 * Completeness and purity of the catalogue as the threshold that confirms moves, all other thresholds of the rule held: what
 * the lens probabilities promise, and what the calibration stamps say where there are any.
 */
import { LENS, NOT_A_LENS } from '@/lib/science/agreement/lens-model'
import { purityOf } from '@/lib/science/agreement/rule-quality'
import type { RuleInput } from '@/lib/work/campaigns/rule-input'
import type { WhatIfColumns } from './what-if-columns'

export interface CurvePoint {
  /** mean points, or evidence (natural log of the likelihood ratio), from which the rule would confirm */
  threshold: number
  confirmed: number
  completeness: number
  purity: number
}

export interface QualityCurve {
  /** by falling threshold; empty where no lens probability is known */
  promised: CurvePoint[]
  /** empty without calibration stamps of both kinds */
  stamps: CurvePoint[]
}

/** Thresholds between which nothing is told apart: 0.01 points, 0.05 in evidence. */
const STEP = { mean: 0.01, reliability: 0.05 } as const
/** Evidence beyond this counts as this: odds of e^25. */
const MOST_EVIDENCE = 25

/** Cost O(rows + thresholds). */
export function qualityCurve(columns: WhatIfColumns, rule: RuleInput): QualityCurve {
  const { candidates, truth, tallies, probabilities, about } = columns
  if (about.lensShare === null) return { promised: [], stamps: [] }
  const [low, high] = rule.method === 'mean' ? [0, 3] : [-MOST_EVIDENCE, MOST_EVIDENCE]
  const step = STEP[rule.method]
  const bins = Math.round((high - low) / step) + 1
  const [count, lenses, stampLenses, stampOthers] = Array.from({ length: 4 }, () => new Float64Array(bins))
  const total = { lenses: 0, stampLenses: 0, stampOthers: 0 }
  for (let row = 0; row < truth.length; row++) {
    const isStamp = row >= candidates
    if (!isStamp) total.lenses += probabilities[row]
    const n = tallies.grades[row]
    if (n < rule.leastGrades) continue
    if (isStamp && truth[row] === LENS) total.stampLenses += 1
    if (isStamp && truth[row] === NOT_A_LENS) total.stampOthers += 1
    const score = scoreOf(tallies, rule, row, n)
    if (Number.isNaN(score)) continue
    // 1e-9 of a step: a sum that ends on a threshold has reached it.
    const bin = Math.floor((Math.min(high, Math.max(low, score)) - low) / step + 1e-9)
    if (!isStamp) {
      count[bin] += 1
      lenses[bin] += probabilities[row]
    } else if (truth[row] === LENS) stampLenses[bin] += 1
    else stampOthers[bin] += 1
  }
  const curve: QualityCurve = { promised: [], stamps: [] }
  const above = { count: 0, lenses: 0, stampLenses: 0, stampOthers: 0 }
  for (let bin = bins - 1; bin >= 0; bin--) {
    const threshold = low + bin * step
    above.count += count[bin]
    above.lenses += lenses[bin]
    above.stampLenses += stampLenses[bin]
    above.stampOthers += stampOthers[bin]
    if (count[bin] > 0 && total.lenses > 0) {
      curve.promised.push({
        threshold,
        confirmed: above.count,
        completeness: above.lenses / total.lenses,
        purity: above.lenses / above.count,
      })
    }
    if (stampLenses[bin] + stampOthers[bin] === 0 || total.stampLenses === 0 || total.stampOthers === 0) continue
    const completeness = above.stampLenses / total.stampLenses
    const purity = purityOf(completeness, above.stampOthers / total.stampOthers, about.lensShare)
    if (purity !== null) curve.stamps.push({ threshold, confirmed: above.count, completeness, purity })
  }
  return curve
}

/** Mean points, or evidence; NaN where the rule splits whatever the threshold is. */
export function scoreOf(tallies: WhatIfColumns['tallies'], rule: RuleInput, row: number, n: number): number {
  if (rule.method === 'reliability') return tallies.evidence[row]
  const sum = tallies.points[row]
  const spread = Math.sqrt(Math.max(0, n * tallies.squaredPoints[row] - sum * sum)) / n
  return spread > rule.splitSpread ? NaN : sum / n
}
