/**
 * Where a rule would have stopped a series of looks, for calibration stamps: everybody may look at a stamp, a candidate gets no
 * look after the one that decides it. Judged from all its looks a stamp would be decided far better than any candidate: by the rule
 * of 0.001 and 0.05 with at most 10 looks, and graders who give A, B, C, N to lenses as 0.45, 0.3, 0.17, 0.08 and to the rest as
 * 0.01, 0.05, 0.24, 0.7, lenses are confirmed to 97.8 % and the rest to 0.043 %; 12 looks read at once say 99.4 % and 0.0005 %.
 */
import { CANNOT_JUDGE } from '@/lib/science/agreement/grade-table'
import { GRADE_POINTS, GRADES, meanAndSpread } from '@/lib/science/agreement/grades'
import { meanRuleProblems, type MeanRule } from '@/lib/science/agreement/mean-rule'
import { reliabilityRuleProblems, type ReliabilityRule } from '@/lib/science/agreement/reliability-rule'
import { reachedBoundary, waldBoundaries } from '@/lib/science/agreement/sequential-test'

/** Looks of each series in the order in which they were given; those of series i are from start[i] to start[i + 1]. */
export interface LookSeries {
  start: Int32Array
  /** 0 to 3 (A, B, C, N), or CANNOT_JUDGE */
  grade: Uint8Array
  /** natural log of the likelihood ratio of that grade of that grader; 0 for CANNOT_JUDGE */
  weight: Float64Array
}

/** One entry a series. */
export interface ReplayedLooks {
  /**
   * The highest threshold at which the rule, its other thresholds held, would have confirmed: evidence, or mean points.
   * -Infinity where none would.
   */
  reach: Float64Array
  /** 1 where nothing more can confirm it at any threshold: it was set aside, or all its looks are in */
  ended: Uint8Array
}

/**
 * By reliability: look by look until the lower boundary is reached, or the most looks are in. Confirmed at an upper boundary u
 * where the evidence came to u before that, with the least grades in. Cost O(looks).
 * @throws RangeError with the first of reliabilityRuleProblems.
 */
export function replayByReliability({ start, grade, weight }: LookSeries, rule: ReliabilityRule): ReplayedLooks {
  const problem = reliabilityRuleProblems(rule)[0]
  if (problem) throw new RangeError(problem)
  const onlyLower = { upper: Infinity, lower: waldBoundaries(rule).lower }
  const replayed = none(start.length - 1)
  for (let series = 0; series < replayed.ended.length; series++) {
    const first = start[series]
    const last = Math.min(start[series + 1], first + rule.mostLooks)
    let evidence = 0
    let grades = 0
    let setAside = false
    for (let look = first; look < last && !setAside; look++) {
      if (grade[look] === CANNOT_JUDGE) continue
      evidence += weight[look]
      grades += 1
      if (grades < rule.leastGrades) continue
      setAside = reachedBoundary(evidence, onlyLower) !== null
      if (!setAside) replayed.reach[series] = Math.max(replayed.reach[series], evidence)
    }
    replayed.ended[series] = setAside || last - first === rule.mostLooks ? 1 : 0
  }
  return replayed
}

/**
 * By the mean, under which a candidate gets all the looks that are wanted: the mean of the first of them, once they are in. Before
 * that its verdict may still turn either way.
 * @throws RangeError with the first of meanRuleProblems.
 */
export function replayByMean({ start, grade }: LookSeries, rule: MeanRule): ReplayedLooks {
  const problem = meanRuleProblems(rule)[0]
  if (problem) throw new RangeError(problem)
  const replayed = none(start.length - 1)
  for (let series = 0; series < replayed.ended.length; series++) {
    if (start[series + 1] - start[series] < rule.gradesWanted) continue
    replayed.ended[series] = 1
    const looks = grade.subarray(start[series], start[series] + rule.gradesWanted)
    const points = Array.from(looks)
      .filter((code) => code !== CANNOT_JUDGE)
      .map((code) => GRADE_POINTS[GRADES[code]])
    const { mean, spread } = meanAndSpread(points)
    if (points.length < rule.leastGrades || mean === null || (spread ?? 0) > rule.splitSpread) continue
    replayed.reach[series] = mean
  }
  return replayed
}

function none(series: number): ReplayedLooks {
  return { reach: new Float64Array(series).fill(-Infinity), ended: new Uint8Array(series) }
}
