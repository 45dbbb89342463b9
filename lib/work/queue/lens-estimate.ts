/** What a candidate's grades come to under a run's model, and what one more look at it would tell. Pure. */
import type { RunModel } from '@/db/schema/consensus'
import type { Answer } from '@/lib/science/agreement/grades'
import { gradeCode } from '@/lib/science/agreement/grade-table'
import { LENS_PSEUDO_COUNTS, type GraderRates } from '@/lib/science/agreement/lens-model'
import type { Outcome } from '@/lib/science/agreement/mean-rule'
import { expectedInformationBits } from '@/lib/science/agreement/next-look'
import { gradeWeights, logOddsOf, probabilityOf } from '@/lib/science/agreement/posterior'
import type { ReliabilityRule } from '@/lib/science/agreement/reliability-rule'
import { reachedBoundary, waldBoundaries, type Boundaries } from '@/lib/science/agreement/sequential-test'

const GRADES = 4

/** Rates of a grader of whom nothing is known: the pseudo-counts of the model, each class summing to 1. */
export function newcomerRates(): { lens: number[]; notLens: number[] } {
  const row = (from: number) => {
    const counts = LENS_PSEUDO_COUNTS.slice(from, from + GRADES)
    const total = counts.reduce((sum, count) => sum + count, 0)
    return counts.map((count) => count / total)
  }
  return { lens: row(0), notLens: row(GRADES) }
}

/** A run's model made ready for many candidates. */
export interface ReadyModel {
  lensShare: number
  /** log odds of a lens before any grade */
  prior: number
  rates: ReadonlyMap<number, GraderRates>
  weights: ReadonlyMap<number, readonly number[]>
  newcomer: GraderRates
  newcomerWeights: readonly number[]
  leftOut: ReadonlySet<number>
  /** rates of everybody who has given a grade that counts; those of a newcomer where nobody has */
  everybody: readonly GraderRates[]
  /** their mean: those of whoever comes next */
  usual: GraderRates
}

export function readyModel(model: RunModel): ReadyModel {
  const leftOut = new Set(model.leftOut)
  const rates = new Map<number, GraderRates>(model.graders.map((grader) => [grader.personId, grader]))
  const weights = new Map(model.graders.map((grader) => [grader.personId, gradeWeights(grader)]))
  const counted = model.graders.filter(({ personId, grades }) => !leftOut.has(personId) && grades > 0)
  const everybody = counted.length > 0 ? counted : [model.newcomer]
  return {
    lensShare: model.lensShare,
    prior: logOddsOf(model.lensShare),
    rates,
    weights,
    newcomer: model.newcomer,
    newcomerWeights: gradeWeights(model.newcomer),
    leftOut,
    everybody,
    usual: meanRates(everybody),
  }
}

function meanRates(graders: readonly GraderRates[]): GraderRates {
  const mean = (of: 'lens' | 'notLens') =>
    Array.from({ length: GRADES }, (_, at) => graders.reduce((sum, grader) => sum + grader[of][at], 0) / graders.length)
  return { lens: mean('lens'), notLens: mean('notLens') }
}

export const ratesIn = (model: ReadyModel, personId: number): GraderRates => model.rates.get(personId) ?? model.newcomer

/** Natural log of a grade's likelihood ratio. 'Cannot judge' has none. */
export function weightIn(model: ReadyModel, personId: number, grade: number): number {
  return (model.weights.get(personId) ?? model.newcomerWeights)[grade]
}

/** Sum of weights, the same to the last bit for any order: strongest for a lens first, as the rule sums them. Sorts `weights`. */
export function sumOfWeights(weights: number[]): number {
  weights.sort((a, b) => b - a)
  let sum = 0
  for (const weight of weights) sum += weight
  return sum
}

export interface LensEstimate {
  grades: number
  cannotJudge: number
  evidence: number
  probability: number
  outcome: Outcome
}

/** The rule's outcome for this evidence, as `decideByReliability` has it. */
export function outcomeOf(
  rule: ReliabilityRule,
  boundaries: Boundaries,
  { grades, looks, evidence }: { grades: number; looks: number; evidence: number },
): Outcome {
  const reached = grades >= rule.leastGrades ? reachedBoundary(evidence, boundaries) : null
  if (reached) return reached === 'confirm' ? 'confirmed' : 'set aside'
  return looks < rule.mostLooks ? 'open' : 'split'
}

/** From the answers that count; those of people who are left out are not counted here either. */
export function estimateLens(
  model: ReadyModel,
  rule: ReliabilityRule,
  answers: readonly { personId: number; grade: Answer }[],
): LensEstimate {
  const counted = answers.filter(({ personId }) => !model.leftOut.has(personId))
  const weights = counted.flatMap(({ personId, grade }) =>
    grade === 'U' ? [] : [weightIn(model, personId, gradeCode(grade))],
  )
  const grades = weights.length
  const evidence = sumOfWeights(weights)
  return {
    grades,
    cannotJudge: counted.length - grades,
    evidence,
    probability: probabilityOf(model.prior + evidence),
    outcome: outcomeOf(rule, waldBoundaries(rule), { grades, looks: counted.length, evidence }),
  }
}

/** Digits to which the worth of a look is kept: finer differences order nothing and would only be written again and again. */
const VALUE_DIGITS = 3

/** Expected information of a look by the usual grader, in bits, to three digits. */
export function lookValue(model: ReadyModel, probability: number): number {
  return Number(expectedInformationBits(probability, model.usual).toPrecision(VALUE_DIGITS))
}

/** What the queue goes by. A candidate that is decided wants no more looks, and one that has the most gets none. */
export function wantOf(
  model: ReadyModel,
  rule: ReliabilityRule,
  estimate: Pick<LensEstimate, 'outcome' | 'probability'>,
  looksGiven: number,
): { settled: 0 | 1; lookValue: number } {
  const settled = estimate.outcome === 'confirmed' || estimate.outcome === 'set aside' ? 1 : 0
  const wanted = settled === 0 && looksGiven < rule.mostLooks
  return { settled, lookValue: wanted ? lookValue(model, estimate.probability) : 0 }
}
