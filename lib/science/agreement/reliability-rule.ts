/**
 * The rule by reliability: how a candidate's grades decide it when each counts by what its grader's grades are worth.
 *
 * 1. Fewer grades than `leastGrades`: open while looks are still to come, else split (too many 'cannot judge').
 * 2. Evidence (sum of weights) at or above the upper boundary of Wald's test: confirmed; at or below the lower: set aside.
 * 3. In between: open while looks are still to come, else split.
 *
 * A look is any answer. Looks are to come as long as there are fewer than `mostLooks`. Boundaries are those of
 * sequential-test.ts; the probability follows from the evidence and the share of lenses.
 */
import { gradesAmong, GRADE_POINTS, meanAndSpread, type Answer } from '@/lib/science/agreement/grades'
import { gradeCode } from '@/lib/science/agreement/grade-table'
import type { GraderRates } from '@/lib/science/agreement/lens-model'
import type { Decision, Outcome } from '@/lib/science/agreement/mean-rule'
import { addGrade, gradeWeight, logOddsOf, probabilityOf } from '@/lib/science/agreement/posterior'
import {
  errorRateProblems,
  probabilityInterval,
  reachedBoundary,
  waldBoundaries,
  type ErrorRates,
} from '@/lib/science/agreement/sequential-test'
import { answersInWords, countOf, probabilityBeside, type WeighedAnswer } from '@/lib/science/agreement/weight-words'

export interface ReliabilityRule extends ErrorRates {
  /** grades, without 'cannot judge', below which nothing is decided; whole, 1 or more */
  leastGrades: number
  /** looks after which a candidate that is still between is a split; whole, at least leastGrades */
  mostLooks: number
}

/** Our choice, no source: with 2 % lenses it aims at a completeness of 0.95 and a purity of 0.95. */
export const DEFAULT_RELIABILITY_RULE: Readonly<ReliabilityRule> = {
  falseConfirmed: 0.001,
  missedLens: 0.05,
  leastGrades: 2,
  mostLooks: 10,
}

export interface ReliabilityAnswer {
  grade: Answer
  /** of the person who gave it */
  rates: GraderRates
  /** what the reason calls that person */
  grader: string
}

export interface ReliabilityDecision extends Decision {
  /** probability that this is a lens, after the grades */
  probability: number
  /** sum of the weights */
  evidence: number
  /** grades from the one that speaks most for a lens to the one that speaks most against it */
  weights: WeighedAnswer[]
}

/** What is wrong with a rule, one sentence each; empty when it can be used. */
export function reliabilityRuleProblems(rule: ReliabilityRule): string[] {
  const problems = errorRateProblems(rule)
  const isCount = (value: number) => Number.isSafeInteger(value) && value >= 1
  if (!isCount(rule.leastGrades)) problems.push('The least number of grades must be a whole number from 1 up.')
  if (!isCount(rule.mostLooks)) problems.push('The most looks must be a whole number from 1 up.')
  if (rule.leastGrades > rule.mostLooks) {
    problems.push(`The least number of grades (${rule.leastGrades}) is above the most looks (${rule.mostLooks}).`)
  }
  return problems
}

/**
 * What the rule makes of a candidate's standing first grades. The same, to the last bit, for any order of the answers.
 * @param lensShare share of lenses among the candidates of the search, inside (0, 1).
 * @throws RangeError with the first of reliabilityRuleProblems, on a share outside (0, 1), or when two grades exclude each
 *   other with certainty (rates without pseudo-counts).
 */
export function decideByReliability(
  rule: ReliabilityRule,
  answers: readonly ReliabilityAnswer[],
  lensShare: number,
): ReliabilityDecision {
  const problem = reliabilityRuleProblems(rule)[0]
  if (problem) throw new RangeError(problem)
  if (!(lensShare > 0 && lensShare < 1))
    throw new RangeError(`The share of lenses is ${lensShare}; it must be between 0 and 1.`)

  const weights = weigh(answers)
  const evidence = weights.reduce((sum, { weight }) => addGrade(sum, weight), 0)
  const probability = probabilityOf(logOddsOf(lensShare) + evidence)
  const { outcome, why } = judge(rule, evidence, answers.length, weights.length, probability, lensShare)
  const cannotJudge = answers.length - weights.length
  const aside = cannotJudge > 0 ? ` ${countOf(cannotJudge, 'look')} could not judge.` : ''
  const start = `Before any grade it was ${probabilityBeside(lensShare)}.`
  return {
    outcome,
    ...meanAndSpread(gradesAmong(answers.map(({ grade }) => grade)).map((grade) => GRADE_POINTS[grade])),
    cannotJudge,
    probability,
    evidence,
    weights,
    reason: `${why} ${weights.length > 0 ? `${start} ${answersInWords(weights)}` : start}${aside}`,
  }
}

function weigh(answers: readonly ReliabilityAnswer[]): WeighedAnswer[] {
  return answers
    .flatMap(({ grade, grader, rates }) =>
      grade === 'U' ? [] : [{ grader, grade, weight: gradeWeight(rates, gradeCode(grade)) }],
    )
    .sort((a, b) => b.weight - a.weight || compare(a.grader, b.grader) || compare(a.grade, b.grade))
}

/** By code unit, so that the order does not depend on a language. */
const compare = (a: string, b: string) => Number(a > b) - Number(a < b)

function judge(
  rule: ReliabilityRule,
  evidence: number,
  looks: number,
  grades: number,
  probability: number,
  lensShare: number,
): { outcome: Outcome; why: string } {
  const toCome = Math.max(0, rule.mostLooks - looks)
  if (grades < rule.leastGrades) {
    if (toCome > 0) {
      return { outcome: 'open', why: `Open: ${grades} of at least ${rule.leastGrades} grades so far.` }
    }
    return {
      outcome: 'split',
      why: `Split: all ${rule.mostLooks} looks are in, but only ${grades} of at least ${rule.leastGrades} grades were given.`,
    }
  }
  const boundaries = waldBoundaries(rule)
  const { confirm, setAside } = probabilityInterval(boundaries, lensShare)
  const says = `the probability of a lens is ${probabilityBeside(probability, confirm, setAside)}`
  const [from, to] = [probabilityBeside(confirm, probability), probabilityBeside(setAside, probability)]
  const reached = reachedBoundary(evidence, boundaries)
  if (reached === 'confirm') return { outcome: 'confirmed', why: `Confirmed: ${says}, at or above ${from}.` }
  if (reached === 'set aside') return { outcome: 'set aside', why: `Set aside: ${says}, at or below ${to}.` }
  const between = `${says}, between ${to} and ${from}`
  if (toCome > 0) return { outcome: 'open', why: `Open: ${between}; at most ${countOf(toCome, 'more look')} to come.` }
  return { outcome: 'split', why: `Split: ${between}, and all ${rule.mostLooks} looks are in.` }
}
