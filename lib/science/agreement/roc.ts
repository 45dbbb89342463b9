/**
 * Receiver operating characteristic of a score against the truth: what share of lenses and of the rest lie at or above
 * each threshold, and the area under the curve, which is the probability that a lens scores above what is none, ties
 * counted one half (H. B. Mann & D. R. Whitney 1947; J. A. Hanley & B. J. McNeil 1982, Radiology 143, 29).
 */

export interface RocPoint {
  /** scores at or above it count as positive; Infinity for the first point */
  threshold: number
  falsePositiveRate: number
  truePositiveRate: number
}

export interface Roc {
  /** from (0, 0) to (1, 1), one a distinct score, by falling threshold */
  points: RocPoint[]
  /** 0 to 1; 0.5 tells nothing */
  area: number
  /** standard error of the area after Hanley & McNeil (1982), equation 1 */
  areaStandardError: number
  positives: number
  negatives: number
}

/**
 * @param scores higher speaks for a lens; finite. @param isLens truth or verdict of each, one length with the scores.
 * @returns null without a lens or without anything else: there is no curve then.
 * @throws RangeError on a score that is not finite or arrays of unlike length. Cost O(n log n).
 */
export function rocCurve(scores: ArrayLike<number>, isLens: ArrayLike<boolean | number>): Roc | null {
  const n = scores.length
  if (isLens.length !== n) throw new RangeError(`There are ${n} scores and ${isLens.length} truths.`)
  let positives = 0
  for (let at = 0; at < n; at++) {
    if (!Number.isFinite(scores[at])) throw new RangeError(`Score ${at} is ${scores[at]}; scores must be finite.`)
    if (isLens[at]) positives += 1
  }
  const negatives = n - positives
  if (positives === 0 || negatives === 0) return null

  const order = Uint32Array.from({ length: n }, (_, at) => at).sort((a, b) => scores[b] - scores[a])
  const points: RocPoint[] = [{ threshold: Infinity, falsePositiveRate: 0, truePositiveRate: 0 }]
  let truePositives = 0
  let falsePositives = 0
  let area = 0
  for (let from = 0; from < n;) {
    const threshold = scores[order[from]]
    const before = truePositives
    const falseBefore = falsePositives
    for (; from < n && scores[order[from]] === threshold; from++) {
      if (isLens[order[from]]) truePositives += 1
      else falsePositives += 1
    }
    area += ((falsePositives - falseBefore) * (before + truePositives)) / 2
    points.push({
      threshold,
      falsePositiveRate: falsePositives / negatives,
      truePositiveRate: truePositives / positives,
    })
  }
  area /= positives * negatives
  return { points, area, areaStandardError: hanleyMcNeil(area, positives, negatives), positives, negatives }
}

function hanleyMcNeil(area: number, positives: number, negatives: number): number {
  const twoPositives = area / (2 - area)
  const twoNegatives = (2 * area * area) / (1 + area)
  const variance =
    area * (1 - area) + (positives - 1) * (twoPositives - area * area) + (negatives - 1) * (twoNegatives - area * area)
  return Math.sqrt(Math.max(0, variance) / (positives * negatives))
}
