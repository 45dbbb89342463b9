/**
 * How complete and how pure a catalogue is that a rule would make, from calibration stamps.
 *   completeness c = confirmed lenses / lenses,  false positive rate f = confirmed non-lenses / non-lenses, among stamps
 *   purity = s c / (s c + (1 - s) f),  s the share of lenses in the search (not among the stamps, which are chosen)
 *
 * Intervals: c and f Wilson or Clopper-Pearson. Purity rises with c and falls with f, so that it is at least the value at
 * the low end of c and the high end of f. Taken at the level sqrt(L) each, and c and f being from different stamps, both
 * ends hold together with probability L or more (Clopper-Pearson): the interval of the purity is conservative. The share s
 * enters as known or with a range of its own, whose ends are then taken too. Bayes' rule with separate samples is
 * N. D. Mercaldo, K. F. Lau & X. H. Zhou (2007), Statistics in Medicine 26, 2170 (from memory); these intervals are not theirs.
 */
import { clopperPearsonInterval, wilsonInterval, type Interval } from '@/lib/science/agreement/binomial-intervals'

export interface CalibrationCounts {
  /** calibration stamps that are lenses, and those of them that the rule would confirm; whole, 0 or more */
  lenses: number
  lensesConfirmed: number
  /** the same for stamps that are no lenses */
  nonLenses: number
  nonLensesConfirmed: number
}

export interface Estimate {
  /** null where nothing was counted */
  value: number | null
  interval: Interval | null
}

export interface RuleQuality {
  completeness: Estimate
  falsePositiveRate: Estimate
  purity: Estimate
}

export interface RuleQualityOptions {
  level?: number
  intervals?: 'Wilson' | 'Clopper-Pearson'
  /** range of the share of lenses that the purity's interval must cover */
  lensShareRange?: Interval
}

/**
 * @param lensShare share of lenses in the search, in [0, 1].
 * @returns purity null where nothing would be confirmed or stamps of one kind are missing.
 * @throws RangeError on counts or levels outside their domain.
 */
export function ruleQuality(
  counts: CalibrationCounts,
  lensShare: number,
  { level = 0.95, intervals = 'Wilson', lensShareRange }: RuleQualityOptions = {},
): RuleQuality {
  const range = lensShareRange ?? { low: lensShare, high: lensShare }
  if (
    !(lensShare >= 0 && lensShare <= 1) ||
    !(range.low >= 0 && range.low <= lensShare && range.high >= lensShare && range.high <= 1)
  ) {
    throw new RangeError('The share of lenses must be between 0 and 1, and its range around it.')
  }
  const intervalOf = intervals === 'Wilson' ? wilsonInterval : clopperPearsonInterval
  const estimate = (x: number, n: number, at: number): Estimate => ({
    value: n > 0 ? x / n : null,
    interval: intervalOf(x, n, at),
  })
  const completeness = (at: number) => estimate(counts.lensesConfirmed, counts.lenses, at)
  const falsePositives = (at: number) => estimate(counts.nonLensesConfirmed, counts.nonLenses, at)
  const [c, f] = [completeness(Math.sqrt(level)), falsePositives(Math.sqrt(level))]
  return {
    completeness: completeness(level),
    falsePositiveRate: falsePositives(level),
    purity: {
      value: c.value === null || f.value === null ? null : purityOf(c.value, f.value, lensShare),
      interval: c.interval &&
        f.interval && {
          low: purityOf(c.interval.low, f.interval.high, range.low) ?? 0,
          high: purityOf(c.interval.high, f.interval.low, range.high) ?? 1,
        },
    },
  }
}

/** Purity by Bayes' rule; null where nothing is confirmed. All in [0, 1]. */
export function purityOf(completeness: number, falsePositiveRate: number, lensShare: number): number | null {
  const right = lensShare * completeness
  const confirmed = right + (1 - lensShare) * falsePositiveRate
  return confirmed > 0 ? right / confirmed : null
}

/**
 * Completeness and purity that the probabilities themselves promise, if they are calibrated: for a threshold moved before
 * any stamp is counted. Candidates only, no calibration stamps.
 *   purity = mean of p over the confirmed,   completeness = sum of p over the confirmed / sum of p over all
 * @param probabilities of a lens. @param isConfirmed told the index. @returns null where a divisor is zero.
 */
export function promisedQuality(
  probabilities: ArrayLike<number>,
  isConfirmed: (candidate: number) => boolean,
): { confirmed: number; completeness: number | null; purity: number | null } {
  let confirmed = 0
  let lensesConfirmed = 0
  let lenses = 0
  for (let candidate = 0; candidate < probabilities.length; candidate++) {
    lenses += probabilities[candidate]
    if (!isConfirmed(candidate)) continue
    confirmed += 1
    lensesConfirmed += probabilities[candidate]
  }
  return {
    confirmed,
    completeness: lenses > 0 ? lensesConfirmed / lenses : null,
    purity: confirmed > 0 ? lensesConfirmed / confirmed : null,
  }
}
