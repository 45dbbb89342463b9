/**
 * The rule of the mean: how a candidate's grades decide it, with the reason in words.
 *
 * 1. Fewer grades than `leastGrades`: open while looks are still to come, else split (too many 'cannot judge').
 * 2. Spread above `splitSpread`: split.
 * 3. Mean at or above `confirmMean`: confirmed. Mean at or below `setAsideMean`: set aside.
 * 4. In between: open while looks are still to come, else split.
 *
 * A look is any answer, a grade or 'cannot judge'. Looks are to come as long as there are fewer than `gradesWanted`.
 */
import { GRADE_POINTS, gradesAmong, meanAndSpread, type Answer } from '@/lib/science/agreement/grades'

export interface MeanRule {
  /** looks that a candidate gets */
  gradesWanted: number
  /** grades, without 'cannot judge', below which nothing is decided */
  leastGrades: number
  /** points: mean from which a candidate is confirmed */
  confirmMean: number
  /** points: mean down to which a candidate is set aside; below confirmMean */
  setAsideMean: number
  /** points: population standard deviation above which the grades are a split */
  splitSpread: number
}

/**
 * Six or more independent graders even out the differences between people (Rojas et al. 2023, MNRAS 523, 4413).
 * The least number and the thresholds are common practice, no source.
 */
export const DEFAULT_MEAN_RULE: Readonly<MeanRule> = {
  gradesWanted: 6,
  leastGrades: 4,
  confirmMean: 2,
  setAsideMean: 1,
  splitSpread: 1,
}

export type Outcome = 'open' | 'split' | 'confirmed' | 'set aside'

export interface Decision {
  outcome: Outcome
  /** number of grades, without 'cannot judge' */
  n: number
  cannotJudge: number
  /** points, null when n = 0 */
  mean: number | null
  /** points, population standard deviation, null when n = 0 */
  spread: number | null
  reason: string
}

/** What is wrong with a rule, one sentence each; empty when it can be used. */
export function meanRuleProblems(rule: MeanRule): string[] {
  const problems: string[] = []
  const isCount = (value: number) => Number.isSafeInteger(value) && value >= 1
  const isPoint = (value: number) => value >= 0 && value <= 3
  if (!isCount(rule.gradesWanted)) problems.push('The number of grades wanted must be a whole number from 1 up.')
  if (!isCount(rule.leastGrades)) problems.push('The least number of grades must be a whole number from 1 up.')
  if (rule.leastGrades > rule.gradesWanted) {
    problems.push(`The least number of grades (${rule.leastGrades}) is above the number wanted (${rule.gradesWanted}).`)
  }
  if (!isPoint(rule.confirmMean)) problems.push('The mean that confirms must be between 0 and 3 points.')
  if (!isPoint(rule.setAsideMean)) problems.push('The mean that sets aside must be between 0 and 3 points.')
  if (rule.setAsideMean >= rule.confirmMean) {
    problems.push(
      `The mean that sets aside (${rule.setAsideMean}) must be below the one that confirms (${rule.confirmMean}).`,
    )
  }
  if (!(rule.splitSpread >= 0)) problems.push('The spread that makes a split must be 0 points or more.')
  return problems
}

/**
 * What the rule makes of a candidate's standing first grades. The same for any order of the grades.
 * @throws RangeError with the first of `meanRuleProblems` when the rule cannot be used.
 */
export function decide(rule: MeanRule, answers: readonly { grade: Answer }[]): Decision {
  const problem = meanRuleProblems(rule)[0]
  if (problem) throw new RangeError(problem)

  const grades = gradesAmong(answers.map((answer) => answer.grade))
  const { n, mean, spread } = meanAndSpread(grades.map((grade) => GRADE_POINTS[grade]))
  const looks = answers.length
  const cannotJudge = looks - n
  const toCome = Math.max(0, rule.gradesWanted - looks)
  const decision = (outcome: Outcome, reason: string): Decision => ({ outcome, n, cannotJudge, mean, spread, reason })
  const aside = cannotJudge > 0 ? `, and ${cannotJudge} 'cannot judge'` : ''

  if (mean === null || spread === null || n < rule.leastGrades) {
    if (toCome > 0) return decision('open', `Open: ${n} of at least ${rule.leastGrades} grades so far${aside}.`)
    return decision(
      'split',
      `Split: all ${rule.gradesWanted} wanted looks are in, but ${cannotJudge} could not judge and ` +
        `only ${n} of at least ${rule.leastGrades} grades were given.`,
    )
  }

  const given = `grades ${grades.join(', ')}${aside}`
  if (spread > rule.splitSpread) {
    return decision(
      'split',
      `Split: ${given}; the spread ${beside(spread, rule.splitSpread)} is above ${show(rule.splitSpread)}.`,
    )
  }
  const within = `spread ${beside(spread, rule.splitSpread)}, within ${show(rule.splitSpread)}`
  if (mean >= rule.confirmMean) {
    const numbers = `mean ${beside(mean, rule.confirmMean)}, at or above ${show(rule.confirmMean)}, and ${within}`
    return decision('confirmed', `Confirmed: ${count(n, 'grade')} with ${numbers}${aside}.`)
  }
  if (mean <= rule.setAsideMean) {
    const numbers = `mean ${beside(mean, rule.setAsideMean)}, at or below ${show(rule.setAsideMean)}, and ${within}`
    return decision('set aside', `Set aside: ${count(n, 'grade')} with ${numbers}${aside}.`)
  }
  const between =
    `the mean ${beside(mean, rule.setAsideMean, rule.confirmMean)} is between ` +
    `${show(rule.setAsideMean)} and ${show(rule.confirmMean)}`
  if (toCome > 0) return decision('open', `Open: ${given}; ${between}; ${count(toCome, 'more look')} to come.`)
  return decision('split', `Split: ${given}; ${between}, and all ${rule.gradesWanted} wanted looks are in.`)
}

function count(number: number, noun: string): string {
  return `${number} ${noun}${number === 1 ? '' : 's'}`
}

/** A threshold: two decimals, or all of them when it has more. */
function show(value: number): string {
  return Number(value.toFixed(2)) === value ? value.toFixed(2) : String(value)
}

/** A value beside thresholds: as many decimals as it takes to see that it differs from each, at least two. */
function beside(value: number, ...thresholds: number[]): string {
  let decimals = 2
  const looksEqual = () => thresholds.some((other) => other !== value && Number(value.toFixed(decimals)) === other)
  while (decimals < 15 && looksEqual()) decimals += 1
  return value.toFixed(decimals)
}
