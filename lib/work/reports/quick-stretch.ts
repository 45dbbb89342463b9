import { ALERT } from './alert-thresholds'
import type { GradeSheet } from './grade-sheet'
import type { GraderReport } from './report-types'

const { stretch: STRETCH, quickOfStretch: QUICK_OF_STRETCH, quickSeconds: QUICK_SECONDS } = ALERT

/** The longest run of overlapping very quick stretches of a person; null for none. Looks without a time are not quick. */
export function findQuickStretch(sheet: GradeSheet, from: number, to: number): GraderReport['quickStretch'] {
  const looks: number[] = []
  for (let at = from; at < to; at++) if (sheet.isLook[at]) looks.push(at)
  const isQuick = (place: number) => sheet.seconds[looks[place]] < QUICK_SECONDS
  let quick = 0
  let runStart = -1
  let best: { start: number; end: number } | null = null
  for (let end = 0; end < looks.length; end++) {
    if (isQuick(end)) quick += 1
    if (end >= STRETCH && isQuick(end - STRETCH)) quick -= 1
    const start = end - STRETCH + 1
    if (start < 0 || quick < QUICK_OF_STRETCH) {
      runStart = -1
      continue
    }
    if (runStart < 0) runStart = start
    if (!best || end - runStart > best.end - best.start) best = { start: runStart, end }
  }
  if (!best) return null
  const seconds = looks
    .slice(best.start, best.end + 1)
    .map((at) => sheet.seconds[at])
    .filter((value) => value >= 0)
    .sort((a, b) => a - b)
  return {
    from: best.start + 1,
    to: best.end + 1,
    at: sheet.givenAt[looks[best.start]],
    medianSeconds: seconds[seconds.length >> 1],
  }
}
