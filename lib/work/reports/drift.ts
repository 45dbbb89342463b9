import { UNKNOWN_TRUTH } from '@/lib/science/agreement/dawid-skene-options'
import { CANNOT_JUDGE } from '@/lib/science/agreement/grade-table'
import { LENS } from '@/lib/science/agreement/lens-model'
import { gradeWeight, probabilityOf } from '@/lib/science/agreement/posterior'
import type { GradeSheet } from './grade-sheet'
import type { LensFit } from './lens-fit'
import type { Drift, DriftChange, DriftWindow, ShareEstimate } from './report-types'
import { estimateTwoRates, shareOfEffective, type JudgedGrade } from './two-rates'

/** Grades of a window: an eighth of a person's own, at least 40. Our choice, no source. */
const LEAST_WINDOW = 40
const WINDOWS_WIDE = 8
/** A first and a last third are compared from this many grades on. Our choice, no source. */
const LEAST_FOR_CHANGE = 90
/** Lenses, or others, that a window must be worth for its share to be told, and a third to be compared. Our choice, no source. */
const LEAST_IN_WINDOW = 1
const LEAST_IN_THIRD = 8
const GRADES_SAYING_LENS = 2

/**
 * A person's counted grades in the order in which they were given, each beside what the others' grades say of the candidate
 * (or its truth, where that is known), so that nobody is measured against themselves.
 */
export function judgedGrades(
  sheet: GradeSheet,
  fit: LensFit,
  grader: number,
  isOut: boolean,
  places: { from: number; to: number },
): JudgedGrade[] {
  const judged: JudgedGrade[] = []
  for (let at = places.from; at < places.to; at++) {
    if (!sheet.counts[at] || sheet.gradeOf[at] === CANNOT_JUDGE) continue
    const candidate = sheet.candidateOf[at]
    const own = isOut ? 0 : gradeWeight(fit.rates[grader], sheet.gradeOf[at])
    const known = sheet.truth[candidate]
    judged.push({
      at: sheet.givenAt[at],
      saysLens: sheet.gradeOf[at] < GRADES_SAYING_LENS,
      probability: known === UNKNOWN_TRUTH ? probabilityOf(fit.logOdds[candidate] - own) : Number(known === LENS),
    })
  }
  return judged
}

/**
 * Reliability in sliding windows of a person's own grades, each half over the one before: the share of lenses to which they
 * gave A or B and of the rest to which they gave C or N, both estimated from the window alone.
 */
export function measureDrift(judged: readonly JudgedGrade[]): Drift {
  const size = Math.max(LEAST_WINDOW, Math.ceil(judged.length / WINDOWS_WIDE))
  const windows: DriftWindow[] = []
  const step = Math.floor(size / 2)
  for (let from = 0; from + size <= judged.length; from += step) {
    // What is left after the last whole step is taken into the last window.
    const to = from + step + size > judged.length ? judged.length : from + size
    windows.push({
      from: from + 1,
      to,
      fromAt: judged[from].at,
      toAt: judged[to - 1].at,
      ...sharesOf(judged.slice(from, to), LEAST_IN_WINDOW),
    })
  }
  return { size, windows, change: changeOf(judged) }
}

/** First third against last third: the larger of the two changes whose intervals do not overlap. */
function changeOf(judged: readonly JudgedGrade[]): DriftChange | null {
  if (judged.length < LEAST_FOR_CHANGE) return null
  const third = Math.floor(judged.length / 3)
  const before = sharesOf(judged.slice(0, third), LEAST_IN_THIRD)
  const after = sharesOf(judged.slice(-third), LEAST_IN_THIRD)
  const change = (what: DriftChange['what'], first: ShareEstimate | null, last: ShareEstimate | null) =>
    first && last && (first.interval.high < last.interval.low || last.interval.high < first.interval.low)
      ? [{ what, before: first, after: last }]
      : []
  const changes: DriftChange[] = [
    ...change('lenses', before.lensesSeen, after.lensesSeen),
    ...change('what is no lens', before.nonLensesSeen, after.nonLensesSeen),
  ]
  const size = ({ before, after }: DriftChange) => Math.abs(after.value - before.value)
  return changes.sort((a, b) => size(b) - size(a))[0] ?? null
}

/** @param least effective number of lenses, or others, below which a share is not told */
function sharesOf(judged: readonly JudgedGrade[], least: number): Pick<DriftWindow, 'lensesSeen' | 'nonLensesSeen'> {
  const { seen, passed, lenses, others } = estimateTwoRates(judged)
  return {
    lensesSeen: lenses < least ? null : shareOfEffective(seen, lenses),
    nonLensesSeen: others < least ? null : shareOfEffective(passed, others),
  }
}
