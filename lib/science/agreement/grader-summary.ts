/**
 * How reliable each grader is, in numbers that a lead reads, from a two-class fit: how often lenses get an A or B from
 * them, how often what is no lens gets a C or N, and what a look of theirs tells.
 *
 * Intervals are the equal-tailed ones of the beta distribution with the expected counts and the pseudo-counts of the fit:
 * the posterior of a share under the prior that the pseudo-counts are. They take the classes' posteriors as counts, so that
 * they do not hold the uncertainty of the truth itself; with calibration stamps only, they are exact.
 */
import type { Interval } from '@/lib/science/agreement/binomial-intervals'
import type { DawidSkeneFit } from '@/lib/science/agreement/dawid-skene'
import {
  LENS,
  LENS_PSEUDO_COUNTS,
  NOT_A_LENS,
  ratesOfGraders,
  type GraderRates,
} from '@/lib/science/agreement/lens-model'
import { expectedInformationBits } from '@/lib/science/agreement/next-look'
import { gradeWeights } from '@/lib/science/agreement/posterior'
import { betaQuantile } from '@/lib/science/agreement/quantiles'

export interface ShareWithInterval {
  value: number
  interval: Interval
}

export interface GraderSummary {
  rates: GraderRates
  /** natural log of the likelihood ratio of each grade, A to N */
  weights: number[]
  /** expected number of lenses and of others that the grader has graded */
  lenses: number
  nonLenses: number
  /** share of lenses to which the grader gives A or B */
  lensesSeen: ShareWithInterval
  /** share of the rest to which the grader gives C or N */
  nonLensesSeen: ShareWithInterval
  /** expected information of a look at a candidate at the fit's share of lenses, in bits */
  bitsPerLook: number
}

/** A and B say lens, C and N say not: our cut, as the points' middle is between them. */
const SAYS_LENS = 2

/**
 * @param fit of two classes under four grades. @param pseudoCounts those of the fit, class by class.
 * @throws RangeError on a fit of other than two classes and four grades, or a level outside (0, 1).
 */
export function summariseGraders(
  fit: DawidSkeneFit,
  pseudoCounts: ArrayLike<number> = LENS_PSEUDO_COUNTS,
  level = 0.95,
): GraderSummary[] {
  if (fit.grades !== 4) throw new RangeError(`The fit has ${fit.grades} grades; the summary is of one with four.`)
  if (!(level > 0 && level < 1)) throw new RangeError(`The level is ${level}; it must be between 0 and 1.`)
  return ratesOfGraders(fit).map((rates, grader) => {
    const countOf = (c: number, from: number, to: number, source: ArrayLike<number>, offset: number) => {
      let sum = 0
      for (let grade = from; grade < to; grade++) sum += source[offset + c * 4 + grade]
      return sum
    }
    const share = (c: number, from: number, to: number): ShareWithInterval => {
      const [inside, all] = [
        [from, to],
        [0, 4],
      ].map(([low, high]) => countOf(c, low, high, fit.counts, grader * 8) + countOf(c, low, high, pseudoCounts, 0))
      return { value: inside / all, interval: betaInterval(inside, all - inside, level) }
    }
    return {
      rates,
      weights: gradeWeights(rates),
      lenses: countOf(LENS, 0, 4, fit.counts, grader * 8),
      nonLenses: countOf(NOT_A_LENS, 0, 4, fit.counts, grader * 8),
      lensesSeen: share(LENS, 0, SAYS_LENS),
      nonLensesSeen: share(NOT_A_LENS, SAYS_LENS, 4),
      bitsPerLook: expectedInformationBits(fit.classShares[LENS], rates),
    }
  })
}

/** Degenerate where one side has no count at all. */
function betaInterval(a: number, b: number, level: number): Interval {
  const tail = (1 - level) / 2
  return { low: a > 0 ? betaQuantile(tail, a, b) : 0, high: b > 0 ? betaQuantile(1 - tail, a, b) : 1 }
}
