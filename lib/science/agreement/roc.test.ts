import { describe, expect, it } from 'vitest'
import { readFixture } from '@/lib/science/agreement/_fixtures'
import { rocCurve, type Roc } from '@/lib/science/agreement/roc'

const reference = readFixture('roc-calibration.json')

describe('rocCurve', () => {
  const roc = rocCurve(reference.score, reference.label) as Roc

  // scikit-learn 1.2.1 roc_curve(drop_intermediate=False) and roc_auc_score; the area as the exact fraction 29/40.
  it('equals scikit-learn on a vector with ties', () => {
    expect(roc.area).toBeCloseTo(reference.auc, 12)
    expect(roc.area).toBeCloseTo(29 / 40, 12)
    const { threshold, fpr, tpr } = reference.roc_points
    expect(roc.points).toHaveLength(threshold.length)
    roc.points.forEach((point, at) => {
      expect(point.threshold).toBe(threshold[at] ?? Infinity)
      expect(point.falsePositiveRate).toBeCloseTo(fpr[at], 9)
      expect(point.truePositiveRate).toBeCloseTo(tpr[at], 9)
    })
  })

  // J. A. Hanley & B. J. McNeil (1982), Radiology 143, 29, equation 1; at area 0.5 it is Mann & Whitney's variance for no
  // ties, (n1 + n2 + 1) / (12 n1 n2), by H. B. Mann & D. R. Whitney (1947), section 4.
  it('has Mann and Whitney’s standard error where the score tells nothing', () => {
    const scores = [1, 2, 2, 1]
    const nothing = rocCurve(scores, [1, 1, 0, 0]) as Roc
    expect(nothing.area).toBe(0.5)
    expect(nothing.areaStandardError).toBeCloseTo(Math.sqrt(5 / (12 * 4)), 12)
  })

  it('is 1 for a perfect score, 0 for the contrary, and unchanged by what keeps the order', () => {
    expect(rocCurve([1, 2, 3], [0, 1, 1])?.area).toBe(1)
    expect(rocCurve([1, 2, 3], [1, 0, 0])?.area).toBe(0)
    const cubed = reference.score.map((score) => 7 * score ** 3 - 2)
    expect(rocCurve(cubed, reference.label)?.area).toBeCloseTo(roc.area, 12)
  })

  it('is null where all are lenses, or none', () => {
    expect(rocCurve([1, 2], [1, 1])).toBeNull()
    expect(rocCurve([], [])).toBeNull()
  })

  it('refuses scores that are not numbers', () => {
    expect(() => rocCurve([NaN], [1])).toThrow('Score 0 is NaN')
    expect(() => rocCurve([1], [])).toThrow('1 scores and 0 truths')
  })
})
