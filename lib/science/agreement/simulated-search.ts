/** A simulated search: which candidates are lenses, what each grader would say of each, and what six looks make of it. */
import { GRADE_POINTS, GRADES } from '@/lib/science/agreement/grades'
import type { GraderRates } from '@/lib/science/agreement/lens-model'
import { drawGrade, drawGraders, type GraderPool } from '@/lib/science/agreement/simulated-graders'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'

export interface SearchScenario {
  candidates: number
  lensShare: number
  pool: GraderPool
  /** at most 32 */
  graders: number
  /** calibration stamps, half of them lenses */
  calibrationStamps: number
  seed: number
}

export interface SimulatedSearch {
  scenario: SearchScenario
  graders: GraderRates[]
  /** 1 for a lens, candidates first, then calibration stamps */
  isLens: Uint8Array
  /** what grader g would say of stamp i, at i * graders + g */
  says: Uint8Array
}

/** Quality of a set of confirmed candidates; purity null when there is none. */
export interface CatalogueQuality {
  completeness: number
  purity: number | null
  /** share of what is no lens that was confirmed */
  falseConfirmed: number
}

/** The number of lenses is lensShare * candidates, rounded; which they are is drawn. */
export function simulateSearch(scenario: SearchScenario): SimulatedSearch {
  const random = new SeededRandom(scenario.seed)
  const { candidates, calibrationStamps, graders: count } = scenario
  if (count > 32 || count < 1) throw new RangeError(`There are ${count} graders; a simulation takes 1 to 32.`)
  const graders = drawGraders(random, scenario.pool, count)
  const stamps = candidates + calibrationStamps
  const isLens = new Uint8Array(stamps)
  for (let left = Math.round(scenario.lensShare * candidates); left > 0;) {
    const candidate = random.integer(0, candidates - 1)
    if (isLens[candidate]) continue
    isLens[candidate] = 1
    left -= 1
  }
  for (let stamp = candidates; stamp < stamps; stamp++) isLens[stamp] = (stamp - candidates) % 2 === 0 ? 1 : 0
  const says = new Uint8Array(stamps * count)
  for (let stamp = 0; stamp < stamps; stamp++) {
    for (let grader = 0; grader < count; grader++) {
      says[stamp * count + grader] = drawGrade(random, isLens[stamp] ? graders[grader].lens : graders[grader].notLens)
    }
  }
  return { scenario, graders, isLens, says }
}

export function qualityOf(
  { scenario, isLens }: SimulatedSearch,
  isConfirmed: (candidate: number) => boolean,
): CatalogueQuality {
  let lenses = 0
  let right = 0
  let wrong = 0
  for (let candidate = 0; candidate < scenario.candidates; candidate++) {
    lenses += isLens[candidate]
    if (!isConfirmed(candidate)) continue
    if (isLens[candidate]) right += 1
    else wrong += 1
  }
  return {
    completeness: lenses > 0 ? right / lenses : 0,
    purity: right + wrong > 0 ? right / (right + wrong) : null,
    falseConfirmed: wrong / (scenario.candidates - lenses),
  }
}

/**
 * Every candidate gets `looks` looks by graders drawn for it; confirmed from a cut on the mean points. The cut is the best
 * there is, known from the truth: the one with the highest harmonic mean of completeness and purity.
 */
export function bestFixedLooks(search: SimulatedSearch, looks: number): CatalogueQuality & { cut: number } {
  const { scenario, says } = search
  const random = new SeededRandom(scenario.seed + 1)
  const points = new Float64Array(scenario.candidates)
  const order = Array.from({ length: scenario.graders }, (_, grader) => grader)
  for (let candidate = 0; candidate < scenario.candidates; candidate++) {
    for (let look = 0; look < looks; look++) {
      const other = random.integer(look, scenario.graders - 1)
      ;[order[look], order[other]] = [order[other], order[look]]
      points[candidate] += GRADE_POINTS[GRADES[says[candidate * scenario.graders + order[look]]]]
    }
  }
  let best = { completeness: 0, purity: null as number | null, falseConfirmed: 0, cut: Infinity }
  let bestScore = -1
  for (let sum = 0; sum <= 3 * looks; sum++) {
    const quality = qualityOf(search, (candidate) => points[candidate] >= sum)
    const purity = quality.purity ?? 0
    const score = (2 * quality.completeness * purity) / (quality.completeness + purity || 1)
    if (score <= bestScore) continue
    bestScore = score
    best = { ...quality, cut: sum / looks }
  }
  return best
}
