import { describe, expect, it } from 'vitest'
import { readFixture } from '@/lib/science/agreement/_fixtures'
import { wilsonInterval } from '@/lib/science/agreement/binomial-intervals'
import { calibrationCurve } from '@/lib/science/agreement/calibration-curve'

const reference = readFixture('roc-calibration.json')

describe('calibrationCurve', () => {
  // scikit-learn 1.2.1: calibration_curve (right-closed bins), brier_score_loss, log_loss; Brier score also as 439/2000.
  it.each(['left', 'right'] as const)('equals scikit-learn in five bins closed on the %s', (closed) => {
    const curve = calibrationCurve(reference.score, reference.label, { bins: 5, closed })
    const expected = reference.calibration_5_uniform_bins[`${closed}_closed`]
    expect(curve.bins).toHaveLength(5)
    curve.bins.forEach((bin, at) => {
      expect(bin.count).toBe(expected.bins[at].count)
      expect(bin.meanProbability).toBeCloseTo(expected.bins[at].mean_predicted, 9)
      expect(bin.lensShare).toBeCloseTo(expected.bins[at].fraction_positive, 9)
      expect(bin.interval).toEqual(wilsonInterval(bin.lenses, bin.count))
    })
    expect(curve.expectedCalibrationError).toBeCloseTo(expected.expected_calibration_error, 9)
    expect(curve.brierScore).toBeCloseTo(439 / 2000, 12)
    expect(curve.brierScore).toBeCloseTo(reference.brier, 12)
    expect(curve.logLoss).toBeCloseTo(reference.log_loss_natural, 9)
  })

  it('puts both ends into bins and leaves empty bins without numbers', () => {
    for (const closed of ['left', 'right'] as const) {
      const { bins } = calibrationCurve([0, 1], [0, 1], { bins: 3, closed })
      expect(bins.map((bin) => bin.count)).toEqual([1, 0, 1])
      expect(bins[1]).toMatchObject({ meanProbability: null, lensShare: null, interval: null })
    }
  })

  it('has an infinite log loss where the truth was given no chance', () => {
    expect(calibrationCurve([0], [1]).logLoss).toBe(Infinity)
    expect(calibrationCurve([0, 1], [0, 1]).logLoss).toBe(0)
  })

  it('says nothing of no candidates and refuses what is no probability', () => {
    expect(calibrationCurve([], [])).toMatchObject({ brierScore: null, logLoss: null, expectedCalibrationError: null })
    expect(() => calibrationCurve([1.1], [1])).toThrow('Probability 0 is 1.1')
    expect(() => calibrationCurve([0.5], [])).toThrow('1 probabilities and 0 truths')
  })
})
