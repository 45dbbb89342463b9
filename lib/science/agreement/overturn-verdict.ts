/** What would have changed a verdict by reliability: each grade left out or another, fewer grades, one more, other rates. */
import { gradeCode } from '@/lib/science/agreement/grade-table'
import { GRADES, type Grade } from '@/lib/science/agreement/grades'
import type { GraderRates } from '@/lib/science/agreement/lens-model'
import type { Outcome } from '@/lib/science/agreement/mean-rule'
import { gradeWeight } from '@/lib/science/agreement/posterior'
import {
  decideByReliability,
  type ReliabilityAnswer,
  type ReliabilityRule,
} from '@/lib/science/agreement/reliability-rule'
import { errorRateProblems, SUM_SLACK, type ErrorRates } from '@/lib/science/agreement/sequential-test'

/** What the verdict rests on. */
export interface VerdictBasis {
  rule: ReliabilityRule
  answers: readonly ReliabilityAnswer[]
  /** inside (0, 1) */
  lensShare: number
}

const decideFrom = ({ rule, answers, lensShare }: VerdictBasis) => decideByReliability(rule, answers, lensShare)

/** Outcome and probability without each answer in turn, in the order of the answers. */
export function withoutEachAnswer(basis: VerdictBasis): { outcome: Outcome; probability: number }[] {
  return basis.answers.map((_, left) => {
    const answers = basis.answers.filter((_, at) => at !== left)
    const { outcome, probability } = decideFrom({ ...basis, answers })
    return { outcome, probability }
  })
}

/** Each answer that would have led to another outcome had the same person given another grade. */
export function overturningGrades(basis: VerdictBasis): { answer: number; instead: Grade; outcome: Outcome }[] {
  const now = decideFrom(basis).outcome
  return basis.answers.flatMap((given, answer) =>
    GRADES.filter((instead) => instead !== given.grade).flatMap((instead) => {
      const answers = basis.answers.with(answer, { ...given, grade: instead })
      const { outcome } = decideFrom({ ...basis, answers })
      return outcome === now ? [] : [{ answer, instead, outcome }]
    }),
  )
}

/**
 * The fewest answers without which the outcome is another: those that speak most for it, strongest first.
 * @returns indexes of answers, or null where leaving out even all of that side changes nothing, or nothing is decided.
 */
export function fewestToOverturn(basis: VerdictBasis): number[] | null {
  const { outcome } = decideFrom(basis)
  if (outcome !== 'confirmed' && outcome !== 'set aside') return null
  const side = outcome === 'confirmed' ? 1 : -1
  const strongest = basis.answers
    .map(({ grade, rates }, at) => ({ at, pull: side * gradeWeight(rates, gradeCode(grade)) }))
    .filter(({ pull }) => pull > 0)
    .sort((a, b) => b.pull - a.pull || a.at - b.at)
  const left: number[] = []
  for (const { at } of strongest) {
    left.push(at)
    const answers = basis.answers.filter((_, answer) => !left.includes(answer))
    if (decideFrom({ ...basis, answers }).outcome !== outcome) return left
  }
  return null
}

/** What each grade of one more grader would make of it. */
export function oneMoreGrade(
  basis: VerdictBasis,
  next: { grader: string; rates: GraderRates },
): { grade: Grade; outcome: Outcome; probability: number }[] {
  return GRADES.map((grade) => {
    const { outcome, probability } = decideFrom({ ...basis, answers: [...basis.answers, { ...next, grade }] })
    return { grade, outcome, probability }
  })
}

/** Significant digits of the error rates that are told. */
const DIGITS = 2

/**
 * The error rates from which on this evidence reaches each boundary, the other rate unchanged: it is confirmed where
 * `falseConfirmed` is allowed to be at least the first, and set aside where `missedLens` is at least the second.
 *   alpha = (1 - beta) e^-evidence,   beta = (1 - alpha) e^evidence
 * Rounded up to two digits, so that a rule with the number told does decide, and never above a rate of the rule itself that decides. The least number of grades is passed over.
 * @returns null where that rate and the other unchanged make no rule: together they must be less than 1.
 */
export function errorRatesToDecide(
  evidence: number,
  { falseConfirmed, missedLens }: ErrorRates,
): { falseConfirmed: number | null; missedLens: number | null } {
  const alpha = roundedUp((1 - missedLens) * Math.exp(-evidence), falseConfirmed)
  const beta = roundedUp((1 - falseConfirmed) * Math.exp(evidence), missedLens)
  return {
    falseConfirmed: errorRateProblems({ falseConfirmed: alpha, missedLens }).length > 0 ? null : alpha,
    missedLens: errorRateProblems({ falseConfirmed, missedLens: beta }).length > 0 ? null : beta,
  }
}

function roundedUp(rate: number, ofRule: number): number {
  if (!(rate > 0 && rate < 1)) return rate
  const near = Number(rate.toPrecision(DIGITS))
  const isEnough = (other: number) => other >= rate * (1 - SUM_SLACK)
  const step = 10 ** (Math.floor(Math.log10(near)) + 1 - DIGITS)
  const up = isEnough(near) ? near : Number((near + step).toPrecision(DIGITS))
  return isEnough(ofRule) ? Math.min(up, ofRule) : up
}
