import type { MeanRule } from '@/lib/science/agreement/mean-rule'

/** The rule as a lead would say it, for forms and histories. */
export function ruleInWords(rule: MeanRule): string {
  const people = rule.gradesWanted === 1 ? 'One person looks' : `${rule.gradesWanted} people look`
  const grades = rule.leastGrades === 1 ? 'one grade' : `${rule.leastGrades} grades`
  return (
    `${people} at each candidate. From ${grades} on it is decided: confirmed at a mean of ${rule.confirmMean} points or more, ` +
    `set aside at ${rule.setAsideMean} or less, a split where the grades spread by more than ${rule.splitSpread}. ` +
    'What lies between waits for further looks, then is a split.'
  )
}
