import type { CandidateOfReport } from '@/db/queries/reports'
import type { RuleInForce } from '@/lib/work/campaigns/rule-in-force'
import { estimateFinish, type FinishEstimate } from './finish-estimate'
import type { GradeSheet } from './grade-sheet'

/** Progress of the search's candidates; calibration stamps are left out. @param now milliseconds since 1970. */
export function measureProgress(sheet: GradeSheet, rule: RuleInForce, now: number): FinishEstimate {
  const given = sheet.candidates.reduce((sum, { truth, given }) => sum + (truth === null ? given : 0), 0)
  return estimateFinish(lookTimes(sheet), given, looksToCome(sheet.candidates, rule), now)
}

function* lookTimes(sheet: GradeSheet): Generator<number> {
  for (let at = 0; at < sheet.answers; at++) {
    if (sheet.isLook[at] && sheet.candidates[sheet.candidateOf[at]].truth === null) yield sheet.givenAt[at]
  }
}

/**
 * Looks that imaged candidates still want, unless a ruling or the estimate has decided them. By the mean rule that is what is
 * missing of the wanted number. By reliability a candidate stops at the first look that decides it: at the least that is one
 * look more (or what is missing of the least grades), at the most all of them, and what is expected is the mean number of looks
 * of the candidates that are decided already, less what is given.
 */
export function looksToCome(
  candidates: readonly CandidateOfReport[],
  rule: Pick<RuleInForce, 'method' | 'gradesWanted' | 'leastGrades'>,
): FinishEstimate['remaining'] {
  const search = candidates.filter(({ truth, imaged }) => truth === null && imaged)
  const decided = search.filter(({ settled, given }) => settled && given > 0)
  const meanOfDecided =
    decided.length > 0 ? decided.reduce((sum, { given }) => sum + given, 0) / decided.length : rule.gradesWanted
  const remaining = { expected: 0, least: 0, most: 0 }
  for (const { given, asked, settled, ruled } of search) {
    const wanted = Math.max(rule.gradesWanted, asked)
    if (ruled || settled || given >= wanted) continue
    const most = wanted - given
    const least = rule.method === 'mean' ? most : Math.min(most, Math.max(1, rule.leastGrades - given))
    remaining.most += most
    remaining.least += least
    remaining.expected += rule.method === 'mean' ? most : Math.min(most, Math.max(least, meanOfDecided - given))
  }
  return remaining
}
