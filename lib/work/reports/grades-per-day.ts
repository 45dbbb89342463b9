import type { GradeSheet } from './grade-sheet'
import type { GradesPerDay } from './report-types'

const DAY_MS = 86_400_000
/** More bars than this do not fit a plot. */
const MOST_BINS = 62
const BIN_DAYS = [1, 7, 28]
const LETTERS = 5

/**
 * Looks a day (UTC), corrections not counted, calibration stamps and repeats counted: it is the work that was done. Quiet days
 * are there with zeros. Long campaigns are told by weeks or by four weeks.
 */
export function countPerDay(sheet: GradeSheet): GradesPerDay {
  let first = Infinity
  let last = -Infinity
  for (let at = 0; at < sheet.answers; at++) {
    if (!sheet.isLook[at]) continue
    const day = Math.floor(sheet.givenAt[at] / DAY_MS)
    if (day < first) first = day
    if (day > last) last = day
  }
  if (last < first) return { binDays: 1, bins: [] }
  const binDays =
    BIN_DAYS.find((days) => (last - first) / days < MOST_BINS) ?? Math.ceil((last - first + 1) / MOST_BINS)
  const bins = Array.from({ length: Math.floor((last - first) / binDays) + 1 }, (_, bin) => ({
    day: new Date((first + bin * binDays) * DAY_MS).toISOString().slice(0, 10),
    byLetter: new Array<number>(LETTERS).fill(0),
    byGrader: new Array<number>(sheet.graders.length).fill(0),
  }))
  for (let at = 0; at < sheet.answers; at++) {
    if (!sheet.isLook[at]) continue
    const bin = bins[Math.floor((Math.floor(sheet.givenAt[at] / DAY_MS) - first) / binDays)]
    bin.byLetter[Math.min(sheet.gradeOf[at], LETTERS - 1)] += 1
    bin.byGrader[sheet.graderOf[at]] += 1
  }
  return { binDays, bins }
}
