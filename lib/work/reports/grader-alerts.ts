import { GRADES } from '@/lib/science/agreement/grades'
import { ALERT } from './alert-thresholds'
import type { AlertInput } from './alerts'
import { tableOfPair } from './pair-agreement'
import type { Alert } from './report-types'
import { nearnessOfGraders } from './typical-agreement'

const percent = (share: number) => `${Math.round(100 * share)} %`
const day = (milliseconds: number) => new Date(milliseconds).toISOString().slice(0, 10)

/** Mean kappa with the others at least 0.2 below the median of the others' own means, over 100 shared grades or more. */
export function alertOnFar({ pairs, people, isOut }: AlertInput, grader: number): Alert[] {
  const among = pairs.filter(({ first, second }) => !isOut[first] && !isOut[second])
  const nearness = nearnessOfGraders(among, people.length)
  const own = nearness[grader]
  if (own.kappa === null || own.shared < ALERT.leastSharedGrades) return []
  const others = nearness
    .flatMap(({ kappa, shared }, other) =>
      other !== grader && kappa !== null && shared >= ALERT.leastSharedGrades ? [kappa] : [],
    )
    .sort((a, b) => a - b)
  // With fewer than two others one cannot say who is far from whom.
  if (others.length < 2) return []
  const middle = others.length >> 1
  const median = others.length % 2 === 1 ? others[middle] : (others[middle - 1] + others[middle]) / 2
  if (own.kappa > median - ALERT.farBelowMedian) return []
  return [
    {
      key: 'far-from-others',
      grader,
      title: 'Grades differently from the others',
      because: `Mean weighted kappa with the others ${own.kappa.toFixed(2)}, over ${own.shared.toLocaleString('en')} pairs of grades; half of the others have ${median.toFixed(2)} or more.`,
      advice: 'Being different is not being wrong. Look at a few candidates together before deciding anything.',
    },
  ]
}

/** One letter in 95 % of 50 grades or more, and at least 10 points more often than the others gave it to the same candidates. */
export function alertOnSame({ people, tables }: AlertInput, grader: number): Alert[] {
  const { grades, letters } = people[grader]
  if (grades < ALERT.leastGradesSame) return []
  const most = letters.reduce((a, b) => (b.given > a.given ? b : a))
  const share = most.given / grades
  if (share < ALERT.sameShare) return []
  const code = GRADES.indexOf(most.grade)
  let same = 0
  let all = 0
  for (let other = 0; other < tables.graders; other++) {
    if (other === grader) continue
    const table = tableOfPair(tables, Math.min(grader, other), Math.max(grader, other))
    for (let i = 0; i < table.length; i++) {
      for (let j = 0; j < table.length; j++) {
        all += table[i][j]
        if ((grader < other ? j : i) === code) same += table[i][j]
      }
    }
  }
  if (all === 0 || share - same / all < ALERT.sameAboveOthers) return []
  return [
    {
      key: 'same-grade',
      grader,
      title: `Nearly always gives ${most.grade}`,
      because: `${most.given.toLocaleString('en')} of ${grades.toLocaleString('en')} grades (${percent(share)}) are ${most.grade}; the others gave ${most.grade} to the same candidates in ${percent(same / all)}.`,
      advice: 'Ask whether the pictures show well on their screen and what they take the letters to mean.',
    },
  ]
}

export function alertOnQuick({ people }: AlertInput, grader: number): Alert[] {
  const stretch = people[grader].quickStretch
  if (!stretch) return []
  const looks = stretch.to - stretch.from + 1
  return [
    {
      key: 'quick-stretch',
      grader,
      title: 'A very quick stretch',
      because: `${looks} looks in a row (their ${stretch.from.toLocaleString('en')}th to ${stretch.to.toLocaleString('en')}th, from ${day(stretch.at)}) took ${stretch.medianSeconds.toFixed(1)} s in the median; three in four or more took less than ${ALERT.quickSeconds} s.`,
      advice: 'Obvious non-lenses go fast. See whether these grades stand beside the others’ before asking.',
    },
  ]
}

/** First against last third of their grades: shares at least 0.1 apart, with intervals that do not overlap. */
export function alertOnDrift({ people }: AlertInput, grader: number): Alert[] {
  const change = people[grader].drift.change
  if (!change || Math.abs(change.after.value - change.before.value) < ALERT.driftStep) return []
  const share = ({ value, interval }: typeof change.before) =>
    `${percent(value)} (${percent(interval.low)} to ${percent(interval.high)})`
  const letters = change.what === 'lenses' ? 'A or B' : 'C or N'
  return [
    {
      key: 'drift',
      grader,
      title: 'Grades otherwise than at the beginning',
      because: `Gave ${letters} to ${share(change.before)} of ${change.what} in the first third of their grades and to ${share(change.after)} in the last.`,
      advice: 'People learn and people tire. The plot of their grades over time shows when it changed.',
    },
  ]
}

export function alertOnHeld({ held, personIds, now }: AlertInput, grader: number): Alert[] {
  const own = held.find(({ personId }) => personId === personIds[grader])
  if (!own) return []
  const idleHours = own.lastGradeAt === null ? Infinity : (now - Date.parse(own.lastGradeAt)) / 3_600_000
  if (idleHours < ALERT.heldHours) return []
  const since = own.lastGradeAt === null ? 'has not graded yet' : `last graded ${Math.floor(idleHours)} hours ago`
  const candidates = own.candidates === 1 ? 'one candidate' : `${own.candidates} candidates`
  return [
    {
      key: 'held',
      grader,
      title: 'Holds candidates without grading them',
      because: `Holds ${candidates} at an open bench and ${since}; nobody else is shown them meanwhile.`,
      advice: 'They come free twenty minutes after the bench is left.',
    },
  ]
}
