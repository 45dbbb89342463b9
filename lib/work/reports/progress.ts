import type { CandidateOfReport } from '@/db/queries/reports'
import type { RuleInForce } from '@/lib/work/campaigns/rule-in-force'
import { estimateFinish, type FinishEstimate } from './finish-estimate'
import type { GradeSheet } from './grade-sheet'

/** Progress of the search's candidates; calibration stamps are left out. @param now milliseconds since 1970. */
export function measureProgress(sheet: GradeSheet, rule: RuleInForce, now: number): FinishEstimate {
  const given = sheet.candidates.reduce((sum, { truth, given }) => sum + (truth === null ? given : 0), 0)
  return estimateFinish(lookTimes(sheet), given, looksToCome(sheet.candidates, rule), now)
}

/** Of the looks that take a place: only they are among those to come. */
function* lookTimes(sheet: GradeSheet): Generator<number> {
  for (let at = 0; at < sheet.answers; at++) {
    if (sheet.isFirst[at] && sheet.candidates[sheet.candidateOf[at]].truth === null) yield sheet.givenAt[at]
  }
}

/**
 * Looks that imaged candidates still want, unless a ruling, the estimate or the first pass has decided them. What waits for the first
 * pass may want none. By the mean rule that is what is
 * missing of the wanted number. By reliability a candidate stops at the first look that decides it: at the least that is one
 * look more (or what is missing of the least grades), at the most all of them. What is expected goes by how many of the candidates
 * that came to a look were decided by it, so that those which are not decided yet, and take longer, are in it.
 */
export function looksToCome(
  candidates: readonly CandidateOfReport[],
  rule: Pick<RuleInForce, 'method' | 'gradesWanted' | 'leastGrades'>,
): FinishEstimate['remaining'] {
  const search = candidates.filter(({ truth, imaged }) => truth === null && imaged)
  const expectedAfter = rule.method === 'mean' ? null : expectedLooks(search, rule.gradesWanted)
  const remaining = { expected: 0, least: 0, most: 0 }
  const share = shareSentOn(search)
  for (const { given, asked, settled, ruled, pass } of search) {
    const wanted = Math.max(rule.gradesWanted, asked)
    if (ruled || settled || given >= wanted || pass === 'dropped') continue
    const most = wanted - given
    const least = expectedAfter ? Math.min(most, Math.max(1, rule.leastGrades - given)) : most
    const expected = Math.min(most, Math.max(least, expectedAfter?.[given] ?? most))
    remaining.most += most
    if (pass === 'sent on') remaining.least += least
    remaining.expected += pass === 'sent on' ? expected : share * expected
  }
  return remaining
}

/** Of what the first pass has gone over, the share that it sent on: what waits for it is expected to follow. All, as long as it has seen none. */
function shareSentOn(search: readonly CandidateOfReport[]): number {
  const sent = search.filter(({ pass }) => pass === 'sent on').length
  const passed = search.filter(({ pass }) => pass !== 'waiting').length
  return passed > 0 ? sent / passed : 1
}

/**
 * Looks that an undecided candidate with 0, 1, … looks has to expect, from the share that each look decides among those that came
 * to it: the product-limit estimate of E. L. Kaplan & P. Meier (1958), JASA 53, 457, undecided candidates being its losses. A look
 * that none has come to yet is taken to decide nothing.
 */
function expectedLooks(search: readonly CandidateOfReport[], wanted: number): Float64Array {
  const came = new Float64Array(wanted + 2)
  const decided = new Float64Array(wanted + 2)
  for (const { given, settled } of search) {
    const look = Math.min(given, wanted)
    came[look] += 1
    if (settled) decided[look] += 1
  }
  for (let look = wanted - 1; look > 0; look--) came[look] += came[look + 1]
  const expected = new Float64Array(wanted + 1)
  for (let look = wanted - 1; look >= 0; look--) {
    const decides = came[look + 1] > 0 ? decided[look + 1] / came[look + 1] : 0
    expected[look] = 1 + (1 - decides) * expected[look + 1]
  }
  return expected
}
