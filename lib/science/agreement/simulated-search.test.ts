import { describe, expect, it } from 'vitest'
import { drawGrade, drawGraders, GRADER_POOLS } from '@/lib/science/agreement/simulated-graders'
import {
  bestFixedLooks,
  qualityOf,
  simulateSearch,
  type SearchScenario,
} from '@/lib/science/agreement/simulated-search'
import { gradeWeights } from '@/lib/science/agreement/posterior'
import { meanWeights, lookSteps } from '@/lib/science/agreement/sample-number'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'

const scenario: SearchScenario = {
  candidates: 2000,
  lensShare: 0.1,
  pool: 'mixed',
  graders: 12,
  calibrationStamps: 40,
  seed: 5,
}

describe('simulated graders', () => {
  it.each(GRADER_POOLS)('have rates that sum to 1: %s', (pool) => {
    for (const { lens, notLens } of drawGraders(new SeededRandom(1), pool, 12)) {
      for (const rates of [lens, notLens]) {
        expect(Array.from(rates).reduce((sum, rate) => sum + rate, 0)).toBeCloseTo(1, 12)
      }
    }
  })

  it('tell more when they are good than when they are poor, and nothing when they are careless', () => {
    const told = (pool: (typeof GRADER_POOLS)[number]) =>
      meanWeights(lookSteps(drawGraders(new SeededRandom(2), pool, 12))).lens
    expect(told('good')).toBeGreaterThan(told('mixed'))
    expect(told('mixed')).toBeGreaterThan(told('poor'))
    expect(gradeWeights(drawGraders(new SeededRandom(2), 'one careless', 3)[0])).toEqual([0, 0, 0, 0])
  })

  it('give grades as often as their rates say', () => {
    const random = new SeededRandom(3)
    const counts = [0, 0, 0, 0]
    for (let at = 0; at < 10_000; at++) counts[drawGrade(random, [0.1, 0.2, 0.3, 0.4])] += 1
    // Six standard deviations of a share of 10,000 are below 0.03.
    counts.forEach((count, grade) => expect(Math.abs(count / 10_000 - 0.1 * (grade + 1))).toBeLessThan(0.03))
  })
})

describe('simulateSearch', () => {
  const search = simulateSearch(scenario)

  it('has exactly the share of lenses, and calibration stamps half of which are', () => {
    expect(search.isLens.slice(0, 2000).filter(Boolean)).toHaveLength(200)
    expect(search.isLens.slice(2000).filter(Boolean)).toHaveLength(20)
  })

  it('is the same for the same seed and another for another', () => {
    expect(simulateSearch(scenario)).toEqual(search)
    expect(simulateSearch({ ...scenario, seed: 6 }).says).not.toEqual(search.says)
  })

  it('refuses more graders than it can hold', () => {
    expect(() => simulateSearch({ ...scenario, graders: 33 })).toThrow('1 to 32')
  })

  it('measures completeness, purity and false positives of what is confirmed', () => {
    expect(qualityOf(search, () => true)).toEqual({ completeness: 1, purity: 0.1, falseConfirmed: 1 })
    expect(qualityOf(search, (at) => search.isLens[at] === 1)).toEqual({
      completeness: 1,
      purity: 1,
      falseConfirmed: 0,
    })
    expect(qualityOf(search, () => false)).toEqual({ completeness: 0, purity: null, falseConfirmed: 0 })
  })

  it('gets better by more looks with the best cut, which is a mean of points', () => {
    const score = ({ completeness, purity }: { completeness: number; purity: number | null }) =>
      (2 * completeness * (purity ?? 0)) / (completeness + (purity ?? 0))
    const [one, six] = [bestFixedLooks(search, 1), bestFixedLooks(search, 6)]
    expect(score(six)).toBeGreaterThan(score(one))
    expect(Number.isInteger(Math.round(six.cut * 6 * 1e9) / 1e9)).toBe(true)
    expect(six.cut).toBeLessThan(3)
  })
})
