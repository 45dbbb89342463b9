import type { RuleInForce } from '@/lib/work/campaigns/rule-in-force'

/** The rule in a sentence, for files that leave. @param when it was in force. */
export function ruleInWords(rule: RuleInForce, when = 'in force then'): string {
  if (rule.method === 'reliability') {
    return (
      `Rule ${rule.version}, ${when}: by the reliability of the graders (Dawid & Skene 1979) and a sequential ` +
      `test (Wald 1945); at most ${rule.mostLooks} looks and at least ${rule.leastGrades} grades; share of non-lenses that may be ` +
      `confirmed ${rule.falseConfirmed}, share of lenses that may be set aside ${rule.missedLens}; split where the looks are used up and neither is ` +
      'reached; open until then; rulings of a lead stand over it.'
    )
  }
  return (
    `Rule ${rule.version}, ${when}: ${rule.gradesWanted} grades wanted and at least ${rule.leastGrades}; ` +
    `grade points A 3, B 2, C 1, N 0; confirmed from a mean of ${rule.confirmMean}, set aside up to ${rule.setAsideMean}, ` +
    `split where the mean lies in between or the population standard deviation is above ${rule.splitSpread}; open while grades are ` +
    `lacking; rulings of a lead stand over it.`
  )
}
