/**
 * Sequential looks against a fixed number of looks for a catalogue as complete and as pure, and against Wald's number.
 *
 * The fixed design confirms by the best cut on mean points, known from the truth. The sequential test gets that design's
 * completeness and purity as its goal. On these candidates it comes out a little above or below; the goal is moved by what
 * is lacking or to spare and the test is run anew, a few times. Of the runs whose catalogue is at least as complete and as
 * pure as the fixed design's, the one with the fewest looks is reported: both designs are set with the truth at hand.
 */
import { lookSteps, waldExpectedLooks } from '@/lib/science/agreement/sample-number'
import { simulateLooks, type LookOptions, type LookReport } from '@/lib/science/agreement/simulate-looks'
import {
  bestFixedLooks,
  simulateSearch,
  type CatalogueQuality,
  type SearchScenario,
  type SimulatedSearch,
} from '@/lib/science/agreement/simulated-search'

export interface LookComparison {
  scenario: SearchScenario
  fixed: CatalogueQuality & { looks: number; cut: number }
  sequential: LookReport
  /** goal of that run */
  goal: { completeness: number; purity: number }
  /** whether its catalogue is at least as complete and as pure as the fixed design's */
  isMatched: boolean
  /** looks per candidate over the fixed number, without and with looks at calibration stamps */
  ofFixed: number
  ofFixedWithCalibration: number
  /** Wald's expected number for the errors that were made and the true rates of a grader drawn at random */
  waldLooks: number
  ofWald: number
}

/** Settings of the simulation that the README reports. */
export const DEFAULT_LOOKS: Readonly<Omit<LookOptions, 'goal'>> = {
  boundaries: 'reached',
  leastLooks: 1,
  mostLooks: 20,
  calibrationShare: 0.05,
  reliabilities: 'learned',
  assignment: 'settle',
}

const RUNS = 8
/** Goals are kept below certainty, which no number of looks reaches. */
const NEAR_CERTAINTY = 0.9995

/** @param fixedLooks at most the number of graders. */
export function compareLooks(
  scenario: SearchScenario,
  options: Omit<LookOptions, 'goal'> = DEFAULT_LOOKS,
  fixedLooks = 6,
): LookComparison {
  const search = simulateSearch(scenario)
  const fixed = { ...bestFixedLooks(search, fixedLooks), looks: fixedLooks }
  const wanted = { completeness: fixed.completeness, purity: fixed.purity ?? 0.5 }
  let goal = { completeness: belowOne(wanted.completeness), purity: belowOne(wanted.purity) }
  let best = { goal, sequential: simulateLooks(search, { ...options, goal }) }
  let last = best.sequential
  for (let run = 1; run < RUNS; run++) {
    goal = {
      completeness: moveGoal(goal.completeness, wanted.completeness, last.completeness),
      purity: moveGoal(goal.purity, wanted.purity, last.purity ?? 0),
    }
    last = simulateLooks(search, { ...options, goal })
    const isFewer = last.looksPerCandidate < best.sequential.looksPerCandidate
    if (isAsGood(last, wanted) && (isFewer || !isAsGood(best.sequential, wanted))) best = { goal, sequential: last }
  }
  const { sequential } = best
  const waldLooks = waldNumber(search, sequential)
  const { looksPerCandidate, calibrationLooksPerCandidate } = sequential
  return {
    scenario,
    fixed,
    sequential,
    goal: best.goal,
    isMatched: isAsGood(sequential, wanted),
    ofFixed: looksPerCandidate / fixedLooks,
    ofFixedWithCalibration: (looksPerCandidate + calibrationLooksPerCandidate) / fixedLooks,
    waldLooks,
    ofWald: looksPerCandidate / waldLooks,
  }
}

/** Whether a catalogue is at least as complete and as pure as wanted. */
export function isAsGood(report: CatalogueQuality, wanted: { completeness: number; purity: number }): boolean {
  return report.completeness >= wanted.completeness && (report.purity ?? 0) >= wanted.purity
}

/**
 * The next goal: moved by the whole of what is lacking, at least a twentieth of the way to certainty; back by half of what is to
 * spare.
 */
export function moveGoal(goal: number, wanted: number, reached: number): number {
  if (reached < wanted) return belowOne(goal + Math.max(wanted - reached, (1 - goal) / 20))
  return Math.max(goal - (reached - wanted) / 2, goal / 2)
}

function belowOne(goal: number): number {
  return Math.min(NEAR_CERTAINTY, goal)
}

/**
 * Wald's expected looks per candidate for the errors that were made and the true rates of a grader drawn at random. An error that
 * never happened counts as half a candidate, since Wald's number for none at all is infinite.
 */
export function waldNumber({ scenario, graders }: SimulatedSearch, made: CatalogueQuality): number {
  const lenses = Math.round(scenario.lensShare * scenario.candidates)
  const rates = {
    falseConfirmed: Math.max(made.falseConfirmed, 0.5 / (scenario.candidates - lenses)),
    missedLens: Math.max(1 - made.completeness, 0.5 / lenses),
  }
  const { lens, notLens } = waldExpectedLooks(rates, lookSteps(graders))
  return (lenses * lens + (scenario.candidates - lenses) * notLens) / scenario.candidates
}
