import { waldBoundaries } from '@/lib/science/agreement/sequential-test'
import type { RuleInput } from '@/lib/work/campaigns/rule-input'

/** What a method does, for choosing between them. */
export const METHOD_IN_WORDS = {
  mean: 'Everybody’s grade counts the same: mean and spread of the grade points decide, after the same number of looks at each candidate.',
  reliability:
    'Each grade counts by what its grader’s grades are worth, learned from all grades and from calibration stamps. A candidate gets no more looks than it takes, usually half as many.',
} as const

/** The rule as a lead would say it, for forms and histories. @throws RangeError on error rates that cannot be used. */
export function ruleInWords(rule: RuleInput): string {
  const grades = rule.leastGrades === 1 ? 'one grade' : `${rule.leastGrades} grades`
  if (rule.method === 'reliability') {
    const { upper, lower } = waldBoundaries(rule)
    const most = rule.gradesWanted === 1 ? 'one person looks' : `${rule.gradesWanted} people look`
    return (
      `At most ${most} at each candidate. From ${grades} on it is decided as soon as its grades weigh enough: confirmed when they ` +
      `multiply the odds of a lens by ${factor(upper)}, set aside when they divide them by ${factor(-lower)}. That ` +
      `confirms about ${percentOf(rule.falseConfirmed)} of what is no lens and sets aside about ${percentOf(rule.missedLens)} of ` +
      'the lenses. What all its looks leave undecided is a split.'
    )
  }
  const people = rule.gradesWanted === 1 ? 'One person looks' : `${rule.gradesWanted} people look`
  return (
    `${people} at each candidate. From ${grades} on it is decided: confirmed at a mean of ${rule.confirmMean} points or more, ` +
    `set aside at ${rule.setAsideMean} or less, a split where the grades spread by more than ${rule.splitSpread}. ` +
    'What lies between waits for further looks, then is a split.'
  )
}

const factor = (logOdds: number) => Number(Math.exp(logOdds).toPrecision(2)).toLocaleString('en')

const percentOf = (share: number) => `${Number((share * 100).toPrecision(3))}\u2009%`
