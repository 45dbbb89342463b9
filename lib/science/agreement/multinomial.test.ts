import { describe, expect, it } from 'vitest'
import { drawBinomial, drawMultinomial } from '@/lib/science/agreement/multinomial'
import { logGamma } from '@/lib/science/agreement/quantiles'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'

const mass = (n: number, k: number, p: number) =>
  Math.exp(logGamma(n + 1) - logGamma(k + 1) - logGamma(n - k + 1) + k * Math.log(p) + (n - k) * Math.log1p(-p))

describe('drawBinomial', () => {
  // Against the binomial distribution itself: chi-square over its outcomes within six standard deviations of its mean.
  it.each([
    [7, 0.3],
    [40, 0.1],
    [40, 0.5],
    [60, 0.8],
    [1000, 0.02],
    [200, 0.97],
  ])('follows the binomial distribution of %d trials with probability %d', (n, p) => {
    const random = new SeededRandom(n)
    const draws = 20_000
    const seen = new Float64Array(n + 1)
    for (let at = 0; at < draws; at++) seen[drawBinomial(random, n, p)] += 1
    let chiSquare = 0
    let cells = 0
    for (let k = 0; k <= n; k++) {
      const expected = draws * mass(n, k, p)
      if (expected < 5) continue
      chiSquare += (seen[k] - expected) ** 2 / expected
      cells += 1
    }
    expect(chiSquare).toBeLessThan(cells + 6 * Math.sqrt(2 * cells))
  })

  it('is certain at the ends', () => {
    const random = new SeededRandom(1)
    expect([drawBinomial(random, 9, 0), drawBinomial(random, 9, 1), drawBinomial(random, 0, 0.5)]).toEqual([0, 9, 0])
  })
})

describe('drawMultinomial', () => {
  it('gives counts that sum to the draws, none where the weight is zero, and as many as the weights say', () => {
    const random = new SeededRandom(2)
    const total = new Float64Array(4)
    for (let at = 0; at < 2000; at++) {
      const counts = drawMultinomial(random, 50, [5, 0, 3, 0])
      expect(counts.reduce((sum, count) => sum + count, 0)).toBe(50)
      counts.forEach((count, category) => (total[category] += count))
    }
    expect([total[1], total[3]]).toEqual([0, 0])
    // Standard deviation of the share is sqrt(0.625 * 0.375 / 100000) = 0.0015.
    expect(Math.abs(total[0] / 100_000 - 0.625)).toBeLessThan(0.008)
  })
})
