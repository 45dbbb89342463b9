/**
 * The product against six looks each decided by the best cut on mean points, for a catalogue at least as complete and as pure, and
 * against Wald's expected number of looks.
 *
 * Both designs are set with the truth at hand: the cut is the best there is, and the two error rates of the product's rule are
 * those whose boundaries reach that catalogue, found on the simulation without a database (compare-looks.ts) and moved after each
 * pass through the product by what was lacking or to spare. Reliabilities and share of lenses are learned, never given.
 */
import { compareLooks, isAsGood, moveGoal, waldNumber } from '@/lib/science/agreement/compare-looks'
import { boundariesReaching, lookSteps } from '@/lib/science/agreement/sample-number'
import { errorRatesFor, type Boundaries, type ErrorRates } from '@/lib/science/agreement/sequential-test'
import {
  bestFixedLooks,
  simulateSearch,
  type CatalogueQuality,
  type SearchScenario,
} from '@/lib/science/agreement/simulated-search'
import { RuleInput } from '@/lib/work/campaigns/rule-input'
import { playSearch, type PlayedSearch } from './play-search'

export const FIXED_LOOKS = 6

export interface DesignComparison {
  scenario: SearchScenario
  fixed: CatalogueQuality & { cut: number }
  product: PlayedSearch
  rule: ErrorRates
  /** whether the product's catalogue is at least as complete and as pure */
  isMatched: boolean
  ofFixed: number
  ofFixedWithCalibration: number
  waldLooks: number
  ofWald: number
  /** the same without database and queue, as a share of the fixed looks */
  pureOfFixed: number
  passes: number
}

export interface CompareOptions {
  /** passes through the product at most; of those whose catalogue matches, the one with the fewest looks is reported */
  passes: number
  leastGrades: number
  onPass?: (pass: number, played: PlayedSearch, isMatched: boolean) => void
}

/** Error rates whose boundaries under Wald's formula are these: his formula solved for alpha and beta. */
export function ratesOfBoundaries({ upper, lower }: Boundaries): ErrorRates {
  const [a, b] = [Math.exp(upper), Math.exp(lower)]
  return { falseConfirmed: (1 - b) / (a - b), missedLens: (b * (a - 1)) / (a - b) }
}

/** Completeness and purity above what is wanted, together, below which another pass is not worth its time. */
const LITTLE_TO_SPARE = 0.015

type Pass = Pick<DesignComparison, 'product' | 'rule' | 'isMatched'>

/** A catalogue that matches before one that does not, then fewer looks. */
const isBetter = (pass: Pass, than: Pass): boolean =>
  pass.isMatched === than.isMatched
    ? pass.product.looksPerCandidate < than.product.looksPerCandidate || !pass.isMatched
    : pass.isMatched

export async function compareDesigns(scenario: SearchScenario, options: CompareOptions): Promise<DesignComparison> {
  const search = simulateSearch(scenario)
  const fixed = bestFixedLooks(search, FIXED_LOOKS)
  const wanted = { completeness: fixed.completeness, purity: fixed.purity ?? 0.5 }
  const pure = compareLooks(scenario)
  const limits = { leastLooks: options.leastGrades, mostLooks: scenario.graders }
  let goal = pure.goal
  let best: Pass | null = null
  let passes = 0
  while (passes < options.passes) {
    passes += 1
    const reaching = boundariesReaching(errorRatesFor(goal, scenario.lensShare), lookSteps(search.graders), limits)
    const rule = ratesOfBoundaries(reaching)
    const product = await playSearch(
      search,
      RuleInput.parse({
        method: 'reliability',
        gradesWanted: scenario.graders,
        leastGrades: options.leastGrades,
        ...rule,
      }),
    )
    const isMatched = isAsGood(product, wanted)
    options.onPass?.(passes, product, isMatched)
    const pass = { product, rule, isMatched }
    if (best === null || isBetter(pass, best)) best = pass
    const purity = product.purity ?? 0
    const toSpare = product.completeness - wanted.completeness + purity - wanted.purity
    if (isMatched && toSpare < LITTLE_TO_SPARE) break
    // Until a catalogue matches goals are only raised: one that was reached stays.
    const move = (goal: number, wanted: number, reached: number) =>
      best?.isMatched || reached < wanted ? moveGoal(goal, wanted, reached) : goal
    goal = {
      completeness: move(goal.completeness, wanted.completeness, product.completeness),
      purity: move(goal.purity, wanted.purity, purity),
    }
  }
  if (!best) throw new RangeError('There must be one pass or more.')
  const { product } = best
  const waldLooks = waldNumber(search, product)
  return {
    scenario,
    fixed,
    ...best,
    ofFixed: product.looksPerCandidate / FIXED_LOOKS,
    ofFixedWithCalibration: (product.looksPerCandidate + product.calibrationLooksPerCandidate) / FIXED_LOOKS,
    waldLooks,
    ofWald: product.looksPerCandidate / waldLooks,
    pureOfFixed: pure.ofFixed,
    passes,
  }
}
