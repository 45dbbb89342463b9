/** Simulated graders: pools with known rates of each grade, drawn around a few kinds. All numbers are our choice, no source. */
import type { GraderRates } from '@/lib/science/agreement/lens-model'
import type { SeededRandom } from '@/lib/science/lensing/seeded-random'

/** How often each kind gives A, B, C, N to lenses and to what is none. */
const KINDS = {
  good: { lens: [0.5, 0.32, 0.13, 0.05], notLens: [0.01, 0.04, 0.17, 0.78] },
  middling: { lens: [0.38, 0.3, 0.2, 0.12], notLens: [0.025, 0.075, 0.25, 0.65] },
  poor: { lens: [0.28, 0.27, 0.25, 0.2], notLens: [0.05, 0.12, 0.3, 0.53] },
  careless: { lens: [0.1, 0.15, 0.3, 0.45], notLens: [0.1, 0.15, 0.3, 0.45] },
} as const
type Kind = keyof typeof KINDS

export type GraderPool = 'good' | 'mixed' | 'poor' | 'one careless'
export const GRADER_POOLS: readonly GraderPool[] = ['good', 'mixed', 'poor', 'one careless']

/** Graders differ from their kind as shares among this many grades do. */
const LIKENESS = 100

/**
 * Rates of a pool: all of one kind; 'mixed' has the three kinds in turn; 'one careless' is mixed with the first grader,
 * a good one, grading without looking.
 */
export function drawGraders(random: SeededRandom, pool: GraderPool, graders: number): GraderRates[] {
  return Array.from({ length: graders }, (_, grader) => {
    const kind = kindOf(pool, grader)
    if (kind === 'careless') return KINDS.careless
    return { lens: near(random, KINDS[kind].lens), notLens: near(random, KINDS[kind].notLens) }
  })
}

function kindOf(pool: GraderPool, grader: number): Kind {
  if (pool === 'good' || pool === 'poor') return pool
  if (pool === 'one careless' && grader === 0) return 'careless'
  return (['good', 'middling', 'poor'] as const)[grader % 3]
}

/** Each rate scattered like a share among LIKENESS grades, kept above 0.002, and normed. */
function near(random: SeededRandom, rates: readonly number[]): number[] {
  const scattered = rates.map((rate) =>
    Math.max(0.002, rate + Math.sqrt((rate * (1 - rate)) / LIKENESS) * random.normal()),
  )
  const total = scattered.reduce((sum, rate) => sum + rate, 0)
  return scattered.map((rate) => rate / total)
}

/** A grade drawn from rates. */
export function drawGrade(random: SeededRandom, rates: ArrayLike<number>): number {
  let left = random.uniform()
  for (let grade = 0; grade < rates.length - 1; grade++) {
    left -= rates[grade]
    if (left < 0) return grade
  }
  return rates.length - 1
}
