/**
 * When a candidate has had enough looks: A. Wald's sequential probability ratio test (1945, Ann. Math. Statist. 16, 117;
 * Sequential Analysis, 1947, section 3.2) between 'lens' and 'not a lens'.
 *
 * The sum of the grades' weights (posterior.ts) is followed look by look. It is enough when it reaches
 *   upper = ln((1 - beta) / alpha):  confirm,    or    lower = ln(beta / (1 - alpha)):  set aside,
 * alpha being the share of what is not a lens that may be confirmed and beta the share of lenses that may be set aside.
 * Wald's inequalities: with right rates and no limit on looks, the true shares exceed neither alpha / (1 - beta) nor
 * beta / (1 - alpha). Seen as a posterior the interval moves with the share of lenses, so that the decision itself does
 * not depend on it; what it does to purity is said by errorRatesFor.
 */
import { logOddsOf, probabilityOf } from '@/lib/science/agreement/posterior'

export interface ErrorRates {
  /** alpha: share of candidates that are no lenses and may still be confirmed; inside (0, 1) */
  falseConfirmed: number
  /** beta: share of lenses that may be set aside; inside (0, 1), and the two sum to less than 1 */
  missedLens: number
}

/** On the sum of weights, natural log of the likelihood ratio. */
export interface Boundaries {
  /** above 0: confirm from here */
  upper: number
  /** below 0: set aside down to here */
  lower: number
}

/** What is wrong with error rates, one sentence each; empty when they can be used. */
export function errorRateProblems({ falseConfirmed, missedLens }: ErrorRates): string[] {
  const problems: string[] = []
  const isRate = (value: number) => value > 0 && value < 1
  if (!isRate(falseConfirmed)) {
    problems.push(`The share of non-lenses that may be confirmed is ${falseConfirmed}; it must be between 0 and 1.`)
  }
  if (!isRate(missedLens)) {
    problems.push(`The share of lenses that may be set aside is ${missedLens}; it must be between 0 and 1.`)
  }
  if (falseConfirmed + missedLens >= 1) problems.push('The two shares of errors must sum to less than 1.')
  return problems
}

/** Wald's boundaries. @throws RangeError with the first of errorRateProblems. */
export function waldBoundaries(rates: ErrorRates): Boundaries {
  const problem = errorRateProblems(rates)[0]
  if (problem) throw new RangeError(problem)
  const { falseConfirmed: alpha, missedLens: beta } = rates
  return {
    upper: Math.log1p(-beta) - Math.log(alpha),
    lower: Math.log(beta) - Math.log1p(-alpha),
  }
}

/** The same boundaries as probabilities of a lens, for a share of lenses inside (0, 1). */
export function probabilityInterval(boundaries: Boundaries, lensShare: number): { confirm: number; setAside: number } {
  const prior = logOddsOf(lensShare)
  return {
    confirm: probabilityOf(prior + boundaries.upper),
    setAside: probabilityOf(prior + boundaries.lower),
  }
}

/**
 * Error rates that give a catalogue of this completeness and purity, were both reached exactly.
 *   beta = 1 - completeness,   alpha = completeness * share (1 - purity) / (purity (1 - share))
 * With them a candidate is confirmed when its probability reaches the purity. Wald's test does a little better than asked,
 * because it passes its boundaries by a part of a step.
 * @param goal each inside (0, 1). @param lensShare share of lenses among candidates, inside (0, 1).
 * @throws RangeError outside that domain, or when the purity asked is no higher than what the grades need not improve.
 */
export function errorRatesFor(goal: { completeness: number; purity: number }, lensShare: number): ErrorRates {
  const inside = (value: number) => value > 0 && value < 1
  if (!inside(goal.completeness) || !inside(goal.purity) || !inside(lensShare)) {
    throw new RangeError('Completeness, purity and the share of lenses must be between 0 and 1.')
  }
  const falseConfirmed = (goal.completeness * lensShare * (1 - goal.purity)) / (goal.purity * (1 - lensShare))
  const rates = { falseConfirmed, missedLens: 1 - goal.completeness }
  if (errorRateProblems(rates).length > 0) {
    throw new RangeError(
      `A purity of ${goal.purity} asks nothing of the grades where the share of lenses is ${lensShare}. Ask for more.`,
    )
  }
  return rates
}

/** Evidence this near to a boundary has reached it, so that the order in which weights were summed decides nothing. */
export const SUM_SLACK = 1e-9

/** Which boundary the evidence has reached; null between them, and for NaN. */
export function reachedBoundary(evidence: number, { upper, lower }: Boundaries): 'confirm' | 'set aside' | null {
  if (evidence >= upper - SUM_SLACK) return 'confirm'
  return evidence <= lower + SUM_SLACK ? 'set aside' : null
}

export interface LookLimits {
  /** looks below which nothing is decided; whole, 1 or more */
  leastLooks: number
  /** looks after which no more are asked for; whole, at least leastLooks */
  mostLooks: number
}

export type SequentialOutcome = 'confirm' | 'set aside' | 'another look' | 'undecided'

/** @param evidence sum of the weights of the looks so far. 'undecided' when the most looks are in and leave it between. */
export function sequentialOutcome(
  evidence: number,
  looks: number,
  boundaries: Boundaries,
  { leastLooks, mostLooks }: LookLimits,
): SequentialOutcome {
  const reached = looks >= leastLooks ? reachedBoundary(evidence, boundaries) : null
  return reached ?? (looks < mostLooks ? 'another look' : 'undecided')
}
