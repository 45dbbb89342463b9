/**
 * A verdict by reliability as arithmetic that one can follow: the prior, each grade with its weight and what it takes the
 * probability to, the sum, the boundaries of the rule. Pure: the same numbers as the run's, from its model and its answers.
 */
import type { Outcome } from '@/lib/science/agreement/mean-rule'
import { isGrade, type Answer, type Grade } from '@/lib/science/agreement/grades'
import { gradeCode } from '@/lib/science/agreement/grade-table'
import type { GraderRates } from '@/lib/science/agreement/lens-model'
import { gradeWeight, logOddsOf } from '@/lib/science/agreement/posterior'
import { decideByReliability, type ReliabilityRule } from '@/lib/science/agreement/reliability-rule'
import { probabilityInterval, waldBoundaries } from '@/lib/science/agreement/sequential-test'
import { factorInWords, weightInWords } from '@/lib/science/agreement/weight-words'

export interface WeighedBy {
  /** The name that this reader may see. */
  by: string
  own: boolean
  grade: Answer
  rates: GraderRates
  /** How many grades of this person the rates were learned from, and how many of those on calibration stamps. */
  learnedFrom: number
  calibration: number
  /** The person is left out of the consensus: nothing of theirs counts. */
  leftOut: boolean
}

/** One step of the sum, in natural log of the odds. */
export interface WhyStep {
  label: string
  /** null: several grades of others in one step, for a grader, who sees nobody's numbers but their own. */
  grade: Grade | null
  own: boolean
  /** 'speaks strongly for a lens' */
  words: string
  /** 'odds times 30' */
  factor: string
  weight: number
  from: number
  to: number
}

/** What a grader's letter is worth and why: shares of lenses, and of what is no lens, that get it. */
export interface WhyRates {
  by: string
  grade: Grade
  ofLenses: number
  ofOthers: number
  learnedFrom: number
  calibration: number
}

export interface ReliabilityWhy {
  outcome: Outcome
  /** probability of a lens before any grade, the share of lenses among the candidates */
  prior: number
  steps: WhyStep[]
  rates: WhyRates[]
  /** sum of the weights, and with the prior's the log odds */
  evidence: number
  logOdds: number
  probability: number
  /** From `confirm` on it is confirmed, down to `setAside` it is set aside. */
  confirm: { probability: number; logOdds: number }
  setAside: { probability: number; logOdds: number }
  cannotJudge: number
  /** Who gave a grade that does not count because they are left out; a grader learns it of themselves only. */
  leftOut: string[]
  /** What would have changed the verdict, in sentences. */
  changes: string[]
  /** What has come since the run that gave the verdict; null where nothing has. */
  since: WhySince | null
}

export interface WhySince {
  newGrades: number
  /** Under the reliabilities of a newer run than the verdict's. */
  newRun: boolean
  probability: number
  outcome: Outcome
}

export interface WhyBasis {
  rule: ReliabilityRule
  answers: readonly WeighedBy[]
  /** inside (0, 1) */
  lensShare: number
}

/** @param onlyOwn for a grader: others' numbers go into one step, and their rates are left out. At least two others, or it is theirs. */
export function explainReliability(
  { rule, answers, lensShare }: WhyBasis,
  { onlyOwn }: { onlyOwn: boolean },
): Omit<ReliabilityWhy, 'changes' | 'since'> {
  const counted = answers.filter(({ leftOut }) => !leftOut)
  const decision = decideByReliability(
    rule,
    counted.map(({ grade, rates, by }) => ({ grade, rates, grader: by })),
    lensShare,
  )
  const interval = probabilityInterval(waldBoundaries(rule), lensShare)
  const graded = counted.flatMap((answer) =>
    isGrade(answer.grade) ? [{ ...answer, grade: answer.grade, weight: weightOf(answer.grade, answer.rates) }] : [],
  )
  const start = logOddsOf(lensShare)
  return {
    outcome: decision.outcome,
    prior: lensShare,
    steps: stepsOf(graded, start, onlyOwn),
    rates: graded.filter(({ own }) => own || !onlyOwn).map(ratesOf),
    evidence: decision.evidence,
    logOdds: start + decision.evidence,
    probability: decision.probability,
    confirm: { probability: interval.confirm, logOdds: logOddsOf(interval.confirm) },
    setAside: { probability: interval.setAside, logOdds: logOddsOf(interval.setAside) },
    cannotJudge: decision.cannotJudge,
    leftOut: answers.filter(({ leftOut, own }) => leftOut && (own || !onlyOwn)).map(({ by }) => by),
  }
}

const weightOf = (grade: Grade, rates: GraderRates) => gradeWeight(rates, gradeCode(grade))

type Weighed = WeighedBy & { grade: Grade; weight: number }

/** From the grade that speaks most for a lens to the one that speaks most against it. */
function stepsOf(graded: readonly Weighed[], start: number, onlyOwn: boolean): WhyStep[] {
  const byWeight = [...graded].sort((a, b) => b.weight - a.weight || Number(a.by > b.by) - Number(a.by < b.by))
  const shown = byWeight.filter(({ own }) => own || !onlyOwn)
  const others = byWeight.filter(({ own }) => !own && onlyOwn)
  const parts = shown.map(({ by, own, grade, weight }) => ({ label: by, own, grade: grade as Grade | null, weight }))
  if (others.length > 0) {
    const weight = others.reduce((sum, one) => sum + one.weight, 0)
    const label = `The other ${others.length} grades together`
    parts.push({ label, own: false, grade: null, weight })
  }
  let at = start
  return parts.map(({ weight, ...part }) => {
    const from = at
    at += weight
    return { ...part, weight, words: wordsOf(weight), factor: factorInWords(weight), from, to: at }
  })
}

/** Several grades together 'speak', one 'speaks'; the row says which, so the verb is left out. */
const wordsOf = (weight: number) => weightInWords(weight).replace(/^speaks /, '')

function ratesOf({ by, grade, rates, learnedFrom, calibration }: Weighed): WhyRates {
  const code = gradeCode(grade)
  return { by, grade, ofLenses: rates.lens[code], ofOthers: rates.notLens[code], learnedFrom, calibration }
}
