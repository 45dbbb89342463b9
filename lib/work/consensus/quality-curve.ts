/**
 * Completeness and purity of the catalogue as the threshold that confirms moves, all other thresholds of the rule held: what
 * the lens probabilities promise, and what the calibration stamps say where there are any, each stopped where the rule would have
 * stopped it.
 */
import { LENS, NOT_A_LENS } from '@/lib/science/agreement/lens-model'
import { purityOf } from '@/lib/science/agreement/rule-quality'
import type { RuleInput } from '@/lib/work/campaigns/rule-input'
import { replayStamps } from './try-rule'
import { isDropped, type WhatIfColumns } from './what-if-columns'

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

/** Cost O(rows + looks of stamps + thresholds). */
export function qualityCurve(columns: WhatIfColumns, rule: RuleInput): QualityCurve {
  if (columns.about.lensShare === null) return { promised: [], stamps: [] }
  const [low, high] = rule.method === 'mean' ? [0, 3] : [-MOST_EVIDENCE, MOST_EVIDENCE]
  const scale = { low, high, step: STEP[rule.method] }
  return { promised: promisedCurve(columns, rule, scale), stamps: stampCurve(columns, rule, scale) }
}

interface Scale {
  low: number
  high: number
  step: number
}

const binsOf = ({ low, high, step }: Scale) => Math.round((high - low) / step) + 1

/** 1e-9 of a step: a sum that ends on a threshold has reached it. */
const binOf = (score: number, { low, high, step }: Scale) =>
  Math.floor((Math.min(high, Math.max(low, score)) - low) / step + 1e-9)

function promisedCurve(columns: WhatIfColumns, rule: RuleInput, scale: Scale): CurvePoint[] {
  const { candidates, tallies, probabilities } = columns
  const bins = binsOf(scale)
  const count = new Float64Array(bins)
  const lenses = new Float64Array(bins)
  let all = 0
  for (let row = 0; row < candidates; row++) {
    if (isDropped(columns, row)) continue
    all += probabilities[row]
    const n = tallies.grades[row]
    const score = n < rule.leastGrades ? NaN : scoreOf(tallies, rule, row, n)
    if (Number.isNaN(score)) continue
    const bin = binOf(score, scale)
    count[bin] += 1
    lenses[bin] += probabilities[row]
  }
  const curve: CurvePoint[] = []
  let confirmed = 0
  let right = 0
  for (let bin = bins - 1; bin >= 0 && all > 0; bin--) {
    if (count[bin] === 0) continue
    confirmed += count[bin]
    right += lenses[bin]
    const threshold = scale.low + bin * scale.step
    curve.push({ threshold, confirmed, completeness: right / all, purity: right / confirmed })
  }
  return curve
}

/** A stamp that wants more looks counts from the threshold on at which those that it has confirm it. */
function stampCurve(columns: WhatIfColumns, rule: RuleInput, scale: Scale): CurvePoint[] {
  const { candidates, truth, about } = columns
  const { reach, ended } = replayStamps(columns, rule)
  const bins = binsOf(scale)
  const kinds = [LENS, NOT_A_LENS].map((kind) => ({
    kind,
    /** at or above the threshold */
    confirmed: 0,
    /** of them those that want more looks */
    ahead: 0,
    ended: 0,
    inBin: new Float64Array(bins),
    aheadInBin: new Float64Array(bins),
  }))
  for (let stamp = 0; stamp < ended.length; stamp++) {
    const of = kinds.find(({ kind }) => kind === truth[candidates + stamp])
    if (!of) continue
    of.ended += ended[stamp]
    if (reach[stamp] === -Infinity) continue
    const bin = binOf(reach[stamp], scale)
    of.inBin[bin] += 1
    of.aheadInBin[bin] += 1 - ended[stamp]
  }
  const curve: CurvePoint[] = []
  const [lenses, others] = kinds
  for (let bin = bins - 1; bin >= 0; bin--) {
    for (const of of kinds) {
      of.confirmed += of.inBin[bin]
      of.ahead += of.aheadInBin[bin]
    }
    if (lenses.inBin[bin] + others.inBin[bin] === 0) continue
    if (lenses.ended + lenses.ahead === 0 || others.ended + others.ahead === 0) continue
    const completeness = lenses.confirmed / (lenses.ended + lenses.ahead)
    const purity = purityOf(completeness, others.confirmed / (others.ended + others.ahead), about.lensShare as number)
    const threshold = scale.low + bin * scale.step
    if (purity !== null) curve.push({ threshold, confirmed: lenses.confirmed + others.confirmed, completeness, purity })
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
