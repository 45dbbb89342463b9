/** Weights and probabilities in plain words and few digits, for reasons that people read. */
import type { Grade } from '@/lib/science/agreement/grades'

export interface WeighedAnswer {
  grader: string
  grade: Grade
  /** natural log of the likelihood ratio; above 0 it speaks for a lens */
  weight: number
}

/**
 * How strongly a grade speaks, by the factor it puts on the odds: below 1.5 'hardly', below 4 'somewhat', below 12
 * 'clearly', else 'strongly'. Our steps, no source.
 */
export function weightInWords(weight: number): string {
  const factor = Math.exp(Math.abs(weight))
  if (factor === 1) return 'says nothing either way'
  const strength = factor < 1.5 ? 'hardly' : factor < 4 ? 'somewhat' : factor < 12 ? 'clearly' : 'strongly'
  return `speaks ${strength} ${weight > 0 ? 'for' : 'against'} a lens`
}

/** What a weight does to the odds: 'odds times 12', 'odds divided by 3.2', 'odds unchanged'. */
export function factorInWords(weight: number): string {
  if (weight === 0) return 'odds unchanged'
  if (!Number.isFinite(weight)) return weight > 0 ? 'odds made certain' : 'odds made zero'
  const factor = Math.exp(Math.abs(weight))
  const shown =
    factor >= 1000 ? '1000 or more' : factor >= 10 ? factor.toFixed(0) : factor.toFixed(factor < 1.1 ? 2 : 1)
  return `odds ${weight > 0 ? 'times' : 'divided by'} ${shown}`
}

/** One sentence a grade: 'The A of avocet speaks strongly for a lens (odds times 30).' */
export function answersInWords(weights: readonly WeighedAnswer[]): string {
  return weights
    .map(
      ({ grade, grader, weight }) => `The ${grade} of ${grader} ${weightInWords(weight)} (${factorInWords(weight)}).`,
    )
    .join(' ')
}

/** A probability with as many digits as it takes to tell it from 0, from 1 and from the others, two at least, ten at most. */
export function probabilityBeside(probability: number, ...others: number[]): string {
  let decimals = 2
  const hidden = () => {
    const shown = Number(probability.toFixed(decimals))
    const atEnd = (shown === 0 && probability > 0) || (shown === 1 && probability < 1)
    return atEnd || others.some((other) => other !== probability && Number(other.toFixed(decimals)) === shown)
  }
  while (decimals < 10 && hidden()) decimals += 1
  return probability.toFixed(decimals)
}

/** What rounding the probability may do to log odds that are shown with two decimals. */
const ODDS_ERROR = 0.0055

/**
 * A probability with so many digits, two decimals at least, ten at most, that its log odds come out within 0.0055 of the true
 * ones: so that who does the sum again arrives at the log odds that stand beside it.
 */
export function probabilityWithOdds(probability: number): string {
  const slope = probability * (1 - probability)
  const decimals = slope > 0 ? Math.ceil(-Math.log10(2 * ODDS_ERROR * slope)) : 2
  return probability.toFixed(Math.min(10, Math.max(2, decimals)))
}

export function countOf(number: number, noun: string): string {
  return `${number} ${noun}${number === 1 ? '' : 's'}`
}
