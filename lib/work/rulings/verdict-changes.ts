/** What would have changed a verdict by reliability, in sentences for people. Pure. */
import { GRADES, type Grade } from '@/lib/science/agreement/grades'
import type { GraderRates } from '@/lib/science/agreement/lens-model'
import type { Outcome } from '@/lib/science/agreement/mean-rule'
import {
  errorRatesToDecide,
  fewestToOverturn,
  oneMoreGrade,
  overturningGrades,
  type VerdictBasis,
} from '@/lib/science/agreement/overturn-verdict'
import { decideByReliability } from '@/lib/science/agreement/reliability-rule'
import { probabilityInterval, waldBoundaries } from '@/lib/science/agreement/sequential-test'
import { probabilityBeside } from '@/lib/science/agreement/weight-words'

/** More sentences on other grades than this say no more. */
const MOST_OTHER_GRADES = 3

/**
 * @param newcomer rates of somebody of whom nothing is known yet, for the grade that may come next.
 * @param mayTell whether the reader may learn what this answer weighs.
 * @returns one sentence a way in which it would be another: grades left out, other grades, one more, other error rates.
 */
export function verdictChanges(
  basis: VerdictBasis,
  newcomer: GraderRates,
  mayTell: (answer: number) => boolean = () => true,
): string[] {
  const { outcome, evidence } = decideByReliability(basis.rule, basis.answers, basis.lensShare)
  return [
    ...withoutGrades(basis, mayTell),
    ...otherGrades(basis, outcome, mayTell),
    oneMore(basis, newcomer, outcome),
    ...otherRates(basis, evidence, outcome),
  ]
}

const named = ({ answers }: VerdictBasis, at: number) => `the ${answers[at].grade} of ${answers[at].grader}`

/** With digits enough to tell it from where the rule decides. */
function besideBoundaries({ rule, lensShare }: VerdictBasis, probability: number): string {
  const { confirm, setAside } = probabilityInterval(waldBoundaries(rule), lensShare)
  return probabilityBeside(probability, confirm, setAside)
}

function withoutGrades(basis: VerdictBasis, mayTell: (answer: number) => boolean): string[] {
  const left = fewestToOverturn(basis)
  if (!left || left.length === 0 || !left.every(mayTell)) return []
  const answers = basis.answers.filter((_, at) => !left.includes(at))
  const { outcome, probability } = decideByReliability(basis.rule, answers, basis.lensShare)
  const which = inARow(left.map((at) => named(basis, at)))
  const fewest =
    left.length === 1 ? `Without ${which}` : `It takes ${left.length} grades left out, ${which}: without them`
  return [`${fewest} it would be ${outcome} (${besideBoundaries(basis, probability)}).`]
}

/** 'Had curlew given C or N instead of A, it would be open.' What several graders could have done is one sentence. */
function otherGrades(basis: VerdictBasis, now: Outcome, mayTell: (answer: number) => boolean): string[] {
  const overturning = overturningGrades(basis)
  // By grader and outcome the letters that lead there, then by what those sentences share the graders.
  const letters = new Map<string, Grade[]>()
  for (const { answer, instead, outcome } of overturning.filter((one) => mayTell(one.answer))) {
    const key = `${answer}|${outcome}`
    letters.set(key, [...(letters.get(key) ?? []), instead])
  }
  const graders = new Map<string, string[]>()
  for (const [key, given] of letters) {
    const [answer, outcome] = key.split('|')
    const { grader, grade } = basis.answers[Number(answer)]
    const instead = GRADES.filter((letter) => given.includes(letter))
    const rest = `given ${inARow(instead, 'or')} instead of ${grade}, it would be ${outcome}.`
    graders.set(rest, [...(graders.get(rest) ?? []), grader])
  }
  const all = [...graders].map(([rest, who]) => `Had ${inARow(who, 'or')} ${rest}`)
  if (overturning.length === 0 && basis.answers.some(({ grade }) => grade !== 'U')) {
    return [`No other grade of any one of them alone would make it anything but ${now}.`]
  }
  const more = all.length - MOST_OTHER_GRADES
  return more > 0
    ? [...all.slice(0, MOST_OTHER_GRADES), `${more} more such ${more === 1 ? 'change' : 'changes'} would do.`]
    : all
}

function oneMore(basis: VerdictBasis, newcomer: GraderRates, now: Outcome): string {
  const outcomes = oneMoreGrade(basis, { grader: 'somebody new', rates: newcomer })
  const changing = outcomes.filter(({ outcome }) => outcome !== now)
  if (changing.length === 0) {
    const [low, high] = [outcomes.at(-1)!, outcomes[0]]
    return (
      `One more grade of somebody new would not change it: the probability would be between ` +
      `${besideBoundaries(basis, low.probability)} (N) and ${besideBoundaries(basis, high.probability)} (A).`
    )
  }
  const each = [...new Set(changing.map(({ outcome }) => outcome))].map((outcome) => {
    const grades = changing.filter((one) => one.outcome === outcome)
    const letters = grades.map(({ grade, probability }) => `${grade} (${besideBoundaries(basis, probability)})`)
    return `${outcome} with ${inARow(letters, 'or')}`
  })
  return `One more grade of somebody new would make it ${inARow(each)}.`
}

/** Error rates decide nothing below the least number of grades; each is told with the other as it is. */
function otherRates({ rule, answers }: VerdictBasis, evidence: number, outcome: Outcome): string[] {
  const lacking = rule.leastGrades - answers.filter(({ grade }) => grade !== 'U').length
  if (lacking > 0) {
    const grades = `${lacking} more ${lacking === 1 ? 'grade' : 'grades'}`
    return [`Without ${grades} no error rates would decide it: the rule asks for at least ${rule.leastGrades}.`]
  }
  const { falseConfirmed, missedLens } = errorRatesToDecide(evidence, rule)
  const confirms =
    falseConfirmed !== null &&
    `confirmed by any rule that lets at least ${falseConfirmed} of what is no lens be confirmed (this one ${rule.falseConfirmed})`
  const setsAside =
    missedLens !== null &&
    `set aside by any rule that lets at least ${missedLens} of lenses be set aside (this one ${rule.missedLens})`
  const told = {
    confirmed: [confirms],
    'set aside': [setsAside],
    open: [confirms, setsAside],
    split: [confirms, setsAside],
  }
  const ways = told[outcome].filter((way) => way !== false)
  return ways.length > 0 ? [`With the other error rate as it is, these grades would be ${inARow(ways, 'or')}.`] : []
}

/** 'a', 'a and b', 'a, b and c' */
function inARow(parts: readonly string[], last = 'and'): string {
  if (parts.length < 2) return parts[0] ?? ''
  return `${parts.slice(0, -1).join(', ')} ${last} ${parts.at(-1)}`
}
