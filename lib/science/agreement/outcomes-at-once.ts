/**
 * What a rule makes of all candidates at once, for thresholds that are being tried: no sentences, flat arrays, one pass.
 * The outcomes are those of `decide` (mean-rule.ts) and `decideByReliability` (reliability-rule.ts).
 */
import type { GradesByCandidate } from '@/lib/science/agreement/grade-table'
import { GRADE_POINTS, GRADES } from '@/lib/science/agreement/grades'
import type { GraderRates } from '@/lib/science/agreement/lens-model'
import { meanRuleProblems, type MeanRule, type Outcome } from '@/lib/science/agreement/mean-rule'
import { gradeWeights } from '@/lib/science/agreement/posterior'
import { reliabilityRuleProblems, type ReliabilityRule } from '@/lib/science/agreement/reliability-rule'
import { reachedBoundary, waldBoundaries } from '@/lib/science/agreement/sequential-test'

/** What is known of each candidate; all arrays have one entry a candidate. */
export interface CandidateTallies {
  /** answers, with 'cannot judge' */
  looks: Uint16Array
  grades: Uint16Array
  /** sums of points and of squared points */
  points: Float64Array
  squaredPoints: Float64Array
  /** sums of weights under the rates given */
  evidence: Float64Array
}

/** Code of each outcome in the arrays below. */
export const OUTCOMES: readonly Outcome[] = ['open', 'split', 'confirmed', 'set aside']
const [OPEN, SPLIT, CONFIRMED, SET_ASIDE] = [0, 1, 2, 3]

/**
 * Tallies of grouped grades. Cost O(grades), once for all thresholds.
 * @param cannotJudge number of such answers of each candidate; none when left out.
 * @throws RangeError when the table has other than four grades.
 */
export function tallyCandidates(
  table: GradesByCandidate,
  rates: readonly GraderRates[],
  cannotJudge?: ArrayLike<number>,
): CandidateTallies {
  if (table.grades !== GRADES.length) throw new RangeError(`The table has ${table.grades} grades; rules are for four.`)
  const { candidates, start, cell } = table
  const weightOf = Float64Array.from(rates.flatMap((grader) => gradeWeights(grader)))
  const pointsOf = GRADES.map((grade) => GRADE_POINTS[grade])
  const tallies: CandidateTallies = {
    looks: new Uint16Array(candidates),
    grades: new Uint16Array(candidates),
    points: new Float64Array(candidates),
    squaredPoints: new Float64Array(candidates),
    evidence: new Float64Array(candidates),
  }
  for (let candidate = 0; candidate < candidates; candidate++) {
    const grades = start[candidate + 1] - start[candidate]
    tallies.grades[candidate] = grades
    tallies.looks[candidate] = grades + (cannotJudge ? cannotJudge[candidate] : 0)
    for (let entry = start[candidate]; entry < start[candidate + 1]; entry++) {
      const points = pointsOf[cell[entry] % GRADES.length]
      tallies.points[candidate] += points
      tallies.squaredPoints[candidate] += points * points
      tallies.evidence[candidate] += weightOf[cell[entry]]
    }
  }
  return tallies
}

/** @returns code of each candidate's outcome. @throws RangeError with the first of meanRuleProblems. */
export function outcomesByMean(tallies: CandidateTallies, rule: MeanRule): Uint8Array {
  const problem = meanRuleProblems(rule)[0]
  if (problem) throw new RangeError(problem)
  const { looks, grades, points, squaredPoints } = tallies
  return Uint8Array.from({ length: grades.length }, (_, candidate) => {
    const n = grades[candidate]
    const between = looks[candidate] < rule.gradesWanted ? OPEN : SPLIT
    if (n < rule.leastGrades) return between
    const sum = points[candidate]
    if (Math.sqrt(Math.max(0, n * squaredPoints[candidate] - sum * sum)) / n > rule.splitSpread) return SPLIT
    if (sum / n >= rule.confirmMean) return CONFIRMED
    return sum / n <= rule.setAsideMean ? SET_ASIDE : between
  })
}

/** @returns code of each candidate's outcome. @throws RangeError with the first of reliabilityRuleProblems. */
export function outcomesByReliability(tallies: CandidateTallies, rule: ReliabilityRule): Uint8Array {
  const problem = reliabilityRuleProblems(rule)[0]
  if (problem) throw new RangeError(problem)
  const { looks, grades, evidence } = tallies
  const boundaries = waldBoundaries(rule)
  return Uint8Array.from({ length: grades.length }, (_, candidate) => {
    const between = looks[candidate] < rule.mostLooks ? OPEN : SPLIT
    if (grades[candidate] < rule.leastGrades) return between
    const reached = reachedBoundary(evidence[candidate], boundaries)
    if (reached === null) return between
    return reached === 'confirm' ? CONFIRMED : SET_ASIDE
  })
}

/** How many candidates have each outcome, and which differ from before. Both arrays have one length. */
export function changedOutcomes(
  before: Uint8Array,
  after: Uint8Array,
): { counts: Record<Outcome, number>; changed: number[] } {
  const totals = [0, 0, 0, 0]
  const changed: number[] = []
  for (let candidate = 0; candidate < after.length; candidate++) {
    totals[after[candidate]] += 1
    if (after[candidate] !== before[candidate]) changed.push(candidate)
  }
  return {
    counts: {
      open: totals[OPEN],
      split: totals[SPLIT],
      confirmed: totals[CONFIRMED],
      'set aside': totals[SET_ASIDE],
    },
    changed,
  }
}
