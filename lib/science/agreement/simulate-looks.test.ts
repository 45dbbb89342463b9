import { describe, expect, it } from 'vitest'
import { compareLooks, DEFAULT_LOOKS } from '@/lib/science/agreement/compare-looks'
import { simulateLooks, type LookOptions } from '@/lib/science/agreement/simulate-looks'
import { simulateSearch, type SearchScenario } from '@/lib/science/agreement/simulated-search'

const scenario: SearchScenario = {
  candidates: 2000,
  lensShare: 0.1,
  pool: 'one careless',
  graders: 12,
  calibrationStamps: 60,
  seed: 3,
}
const search = simulateSearch(scenario)
const options: LookOptions = { ...DEFAULT_LOOKS, mostLooks: 12, goal: { completeness: 0.9, purity: 0.9 } }
const report = simulateLooks(search, options)

describe('simulateLooks', () => {
  it('comes near its goal with learned reliabilities, in less than half of six looks', () => {
    // 200 lenses: three standard deviations of a completeness of 0.9 are 0.064.
    expect(report.completeness).toBeGreaterThan(0.836)
    expect(report.purity).toBeGreaterThan(0.82)
    expect(report.looksPerCandidate).toBeLessThan(3)
    expect(report.looksPerCandidate).toBeGreaterThan(1)
    expect(Math.abs(report.lensShare - 0.1)).toBeLessThan(0.02)
  })

  it('is the same for the same seed', () => {
    expect(simulateLooks(search, options)).toEqual(report)
  })

  it('takes more looks with Wald’s boundaries, which are wider than the goal needs', () => {
    expect(simulateLooks(search, { ...options, boundaries: 'wald' }).looksPerCandidate).toBeGreaterThan(
      report.looksPerCandidate,
    )
  })

  it('takes more looks when they are given out at random, even with known reliabilities', () => {
    const known: LookOptions = { ...options, reliabilities: 'known' }
    expect(simulateLooks(search, { ...known, assignment: 'random' }).looksPerCandidate).toBeGreaterThan(
      simulateLooks(search, known).looksPerCandidate,
    )
  })

  it('keeps to the least and the most looks, and counts what they leave undecided', () => {
    const short = simulateLooks(search, { ...options, leastLooks: 2, mostLooks: 2 })
    expect(short.looksPerCandidate).toBe(2)
    expect(short.undecided).toBeGreaterThan(0)
  })

  it('looks at no calibration stamp when the share is none', () => {
    expect(simulateLooks(search, { ...options, calibrationShare: 0 }).calibrationLooksPerCandidate).toBe(0)
  })
})

describe('compareLooks', () => {
  it('reaches the catalogue of six fixed looks with fewer, near Wald’s number', () => {
    const comparison = compareLooks(
      { ...scenario, candidates: 1000, lensShare: 0.2 },
      { ...DEFAULT_LOOKS, mostLooks: 12 },
    )
    const { fixed, sequential } = comparison
    expect(comparison.isMatched).toBe(true)
    expect(sequential.completeness).toBeGreaterThanOrEqual(fixed.completeness)
    expect(sequential.purity).toBeGreaterThanOrEqual(fixed.purity ?? 1)
    expect(comparison.ofFixed).toBe(sequential.looksPerCandidate / 6)
    expect(comparison.ofFixed).toBeLessThan(0.6)
    expect(comparison.ofFixedWithCalibration).toBeGreaterThan(comparison.ofFixed)
    expect(comparison.ofWald).toBeGreaterThan(0.8)
    expect(comparison.ofWald).toBeLessThan(1.5)
  }, 60_000)
})
