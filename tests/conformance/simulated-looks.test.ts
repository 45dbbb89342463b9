import { beforeAll, describe, expect, it } from 'vitest'
import { bestFixedLooks, simulateSearch } from '@/lib/science/agreement/simulated-search'
import { RuleInput } from '@/lib/work/campaigns/rule-input'
import { ratesOfBoundaries } from '@/tests/simulate/compare-designs'
import { playSearch, type PlayedSearch } from '@/tests/simulate/play-search'
import { waldBoundaries } from '@/lib/science/agreement/sequential-test'

/** 300 candidates, 60 of them lenses; ten graders, one of whom does not look. */
const search = simulateSearch({
  candidates: 300,
  lensShare: 0.2,
  pool: 'one careless',
  graders: 10,
  calibrationStamps: 30,
  seed: 5,
})

describe('a simulated search through the product’s own queue, rule and model', () => {
  let byReliability: PlayedSearch
  let byMean: PlayedSearch
  beforeAll(async () => {
    byReliability = await playSearch(
      search,
      RuleInput.parse({
        method: 'reliability',
        gradesWanted: 10,
        leastGrades: 1,
        falseConfirmed: 0.02,
        missedLens: 0.1,
      }),
    )
    byMean = await playSearch(search, RuleInput.parse({ method: 'mean', gradesWanted: 6, leastGrades: 4 }))
  }, 600_000)

  it('gives every candidate six looks by the mean, and calibration stamps a part beside them', () => {
    expect(byMean.looksPerCandidate).toBe(6)
    expect(byMean.calibrationLooksPerCandidate).toBeGreaterThan(0)
    expect(byMean.calibrationLooksPerCandidate).toBeLessThan(6 * 0.2)
  })

  it('saves at least three looks of ten by reliability, with reliabilities that it learns', () => {
    expect(byReliability.looksPerCandidate).toBeLessThan(0.7 * 6)
    expect(byReliability.looksPerCandidate).toBeGreaterThan(1)
    expect(byReliability.runs).toBeGreaterThan(2)
  })

  it('loses no quality by that: within three standard deviations of six looks and the best cut on their mean', () => {
    const fixed = bestFixedLooks(search, 6)
    // Of 60 lenses, a share of 0.9 scatters by 0.039.
    expect(byReliability.completeness).toBeGreaterThan(fixed.completeness - 3 * 0.039)
    expect(byReliability.purity).toBeGreaterThan((fixed.purity ?? 1) - 3 * 0.039)
  })
})

describe('ratesOfBoundaries', () => {
  it('is the inverse of Wald’s formula', () => {
    const rates = { falseConfirmed: 0.003, missedLens: 0.07 }
    const back = ratesOfBoundaries(waldBoundaries(rates))
    expect(back.falseConfirmed).toBeCloseTo(0.003, 12)
    expect(back.missedLens).toBeCloseTo(0.07, 12)
  })
})
