import type { CandidateOfReport } from '@/db/queries/reports'
import { normalQuantile } from '@/lib/science/agreement/quantiles'
import { rocCurve, type RocPoint } from '@/lib/science/agreement/roc'
import type { ScoreReport } from './report-types'

/** Points kept of the curve: the plot is no finer. The area is that of all of them. */
const MOST_POINTS = 200

/**
 * How well the score of the machine search tells confirmed candidates from those set aside, as they stand now, rulings
 * included. Undecided candidates and calibration stamps are left out. null where one of the two kinds has no score.
 */
export function measureScore(candidates: readonly CandidateOfReport[]): ScoreReport | null {
  const search = candidates.filter(({ truth }) => truth === null)
  const decided = search.filter(({ state }) => state === 'confirmed' || state === 'set aside')
  const scored = decided.filter(({ score }) => score !== null && Number.isFinite(score))
  const roc = rocCurve(
    scored.map(({ score }) => score ?? 0),
    scored.map(({ state }) => state === 'confirmed'),
  )
  if (!roc) return null
  const half = normalQuantile(0.975) * roc.areaStandardError
  return {
    confirmed: roc.positives,
    setAside: roc.negatives,
    undecided: search.length - decided.length,
    withoutScore: decided.length - scored.length,
    area: roc.area,
    interval: { low: Math.max(0, roc.area - half), high: Math.min(1, roc.area + half) },
    points: thinned(roc.points).map(({ threshold, ...rates }) => ({
      threshold: Number.isFinite(threshold) ? threshold : null,
      ...rates,
    })),
  }
}

/** Both ends and evenly many between, by their place along the curve. */
function thinned(points: readonly RocPoint[]): RocPoint[] {
  if (points.length <= MOST_POINTS) return [...points]
  const length = ({ falsePositiveRate, truePositiveRate }: RocPoint) => falsePositiveRate + truePositiveRate
  const kept: RocPoint[] = []
  for (const [index, point] of points.entries()) {
    const due = (kept.length * 2) / (MOST_POINTS - 1)
    if (index === points.length - 1 || length(point) >= due) kept.push(point)
  }
  return kept
}
