/**
 * How many looks a sequential test takes: Wald's approximation, and a recursion over the lattice of evidence, exact for
 * steps on the lattice, that knows overshoot, least and most looks.
 *
 * Wald (1945), equations for E_1(n) and E_0(n) in Sequential Analysis, section 3.5: with E_c(z) the mean weight of a look
 *   lens:        ((1 - beta) upper + beta lower) / E_1(z)
 *   not a lens:  (alpha upper + (1 - alpha) lower) / E_0(z)
 * It neglects that the last step passes the boundary, so that real tests with coarse steps take more.
 */
import type { GraderRates } from '@/lib/science/agreement/lens-model'
import { gradeWeight } from '@/lib/science/agreement/posterior'
import {
  waldBoundaries,
  type Boundaries,
  type ErrorRates,
  type LookLimits,
} from '@/lib/science/agreement/sequential-test'

export interface ExpectedLooks {
  lens: number
  notLens: number
}

/** One thing a look can say: its weight and how often it is said of each class. */
export interface LookStep {
  weight: number
  lens: number
  notLens: number
}

/** The steps of a look by a grader drawn at random from these, each as likely. */
export function lookSteps(graders: readonly GraderRates[]): LookStep[] {
  return graders.flatMap((rates) =>
    Array.from({ length: rates.lens.length }, (_, grade) => ({
      weight: gradeWeight(rates, grade),
      lens: rates.lens[grade] / graders.length,
      notLens: rates.notLens[grade] / graders.length,
    })),
  )
}

/** Mean weight of a look for each class: the Kullback-Leibler divergences, the second with a minus. */
export function meanWeights(steps: readonly LookStep[]): ExpectedLooks {
  const mean = (of: 'lens' | 'notLens') =>
    steps.reduce((sum, step) => sum + (step[of] > 0 ? step[of] * step.weight : 0), 0)
  return { lens: mean('lens'), notLens: mean('notLens') }
}

/** Wald's expected number of looks; Infinity where looks tell nothing. @throws RangeError as waldBoundaries. */
export function waldExpectedLooks(rates: ErrorRates, steps: readonly LookStep[]): ExpectedLooks {
  const { upper, lower } = waldBoundaries(rates)
  const { falseConfirmed: alpha, missedLens: beta } = rates
  const drift = meanWeights(steps)
  const looks = (distance: number, mean: number) => (mean === 0 ? Infinity : distance / mean)
  return {
    lens: looks((1 - beta) * upper + beta * lower, drift.lens),
    notLens: looks(alpha * upper + (1 - alpha) * lower, drift.notLens),
  }
}

/** What becomes of a class: the three shares sum to 1. */
export interface Operation {
  confirmed: number
  setAside: number
  /** still between the boundaries after the most looks */
  undecided: number
  /** mean number of looks */
  looks: number
}

/**
 * Distribution of the evidence carried forward look by look.
 * @param steps independent looks, alike each time; the probabilities of each class sum to 1.
 * @param resolution width of the lattice in natural log units; weights are rounded to it, so that the result is exact
 *   where they are multiples of it. Default 0.005. Infinite weights decide at once.
 * Cost O(most looks * range / resolution * steps).
 */
export function exactOperation(
  steps: readonly LookStep[],
  boundaries: Boundaries,
  limits: LookLimits,
  resolution = 0.005,
): { lens: Operation; notLens: Operation } {
  return {
    lens: carryForward(
      steps.map(({ weight, lens }) => [weight, lens]),
      boundaries,
      limits,
      resolution,
    ),
    notLens: carryForward(
      steps.map(({ weight, notLens }) => [weight, notLens]),
      boundaries,
      limits,
      resolution,
    ),
  }
}

/**
 * The narrowest boundaries whose error rates, overshoot counted in, are no higher than asked: Wald's are wider than
 * needed, because steps pass them by a part of a step. What is undecided after the most looks counts as no error.
 * Found by halving, first the lower boundary, then the upper, between 0 and Wald's, at a resolution of 0.04.
 * @throws RangeError as waldBoundaries.
 */
export function boundariesReaching(rates: ErrorRates, steps: readonly LookStep[], limits: LookLimits): Boundaries {
  const wald = waldBoundaries(rates)
  const resolution = 0.04
  const ofLenses = steps.map(({ weight, lens }) => [weight, lens] as const)
  const ofOthers = steps.map(({ weight, notLens }) => [weight, notLens] as const)
  // Wald's upper boundary leaves more lenses below it than a narrower one does, so that the lower one found first stays good.
  const lower = -narrowest(-wald.lower, resolution, (distance) => {
    const { setAside } = carryForward(ofLenses, { upper: wald.upper, lower: -distance }, limits, resolution)
    return setAside <= rates.missedLens
  })
  const upper = narrowest(wald.upper, resolution, (distance) => {
    const { confirmed } = carryForward(ofOthers, { upper: distance, lower }, limits, resolution)
    return confirmed <= rates.falseConfirmed
  })
  return { upper, lower }
}

/** The smallest distance, to within the resolution, that is good enough; the widest where none below it is. */
function narrowest(widest: number, resolution: number, isEnough: (distance: number) => boolean): number {
  let good = widest
  let bad = 0
  while (good - bad > resolution) {
    const middle = (good + bad) / 2
    if (isEnough(middle)) good = middle
    else bad = middle
  }
  return good
}

/** Evidence this improbable is not followed further. */
const NEGLIGIBLE = 1e-12

function carryForward(
  steps: readonly (readonly [weight: number, probability: number])[],
  { upper, lower }: Boundaries,
  { leastLooks, mostLooks }: LookLimits,
  resolution: number,
): Operation {
  // 1e-9 of a cell: a sum that ends on a boundary has reached it.
  const top = Math.ceil(upper / resolution - 1e-9)
  const bottom = Math.floor(lower / resolution + 1e-9)
  const possible = steps.filter(([, probability]) => probability > 0)
  const longest =
    Math.max(1, ...possible.map(([weight]) => (Number.isFinite(weight) ? Math.abs(weight) : 0))) / resolution
  // Evidence may pass the boundaries while the least looks are not in; infinite weights go to the ends.
  const reach = Math.ceil(longest + 1) * leastLooks
  const first = bottom - reach
  const size = top + reach - first + 1
  const cellOf = (weight: number) =>
    Number.isFinite(weight) ? Math.round(weight / resolution) : Math.sign(weight) * size
  const chances = new Map<number, number>()
  for (const [weight, probability] of possible) {
    chances.set(cellOf(weight), (chances.get(cellOf(weight)) ?? 0) + probability)
  }
  const moves = [...chances]
  const clamp = (cell: number) => Math.min(size - 1, Math.max(0, cell))

  let mass = new Float64Array(size)
  mass[-first] = 1
  const result: Operation = { confirmed: 0, setAside: 0, undecided: 0, looks: 0 }
  for (let look = 1; look <= mostLooks; look++) {
    const next = new Float64Array(size)
    let open = 0
    for (let cell = 0; cell < size; cell++) {
      if (mass[cell] === 0) continue
      open += mass[cell]
      for (const [move, probability] of moves) next[clamp(cell + move)] += mass[cell] * probability
    }
    result.looks += open
    if (look >= leastLooks) {
      for (let cell = 0; cell < size; cell++) {
        if (cell + first >= top) result.confirmed += next[cell]
        else if (cell + first <= bottom) result.setAside += next[cell]
        else continue
        next[cell] = 0
      }
    }
    mass = next
    if (look >= leastLooks && open < NEGLIGIBLE) break
  }
  result.undecided = mass.reduce((sum, value) => sum + value, 0)
  return result
}
