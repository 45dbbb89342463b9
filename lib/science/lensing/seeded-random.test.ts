import { describe, expect, it } from 'vitest'
import { SeededRandom } from './seeded-random'

function moments(draw: () => number, count: number): { mean: number; variance: number } {
  let sum = 0
  let squares = 0
  for (let k = 0; k < count; k++) {
    const value = draw()
    sum += value
    squares += value * value
  }
  return { mean: sum / count, variance: squares / count - (sum / count) ** 2 }
}

describe('the seeded generator', () => {
  // Output of the authors' xoshiro128starstar.c 1.1 from the state {1, 2, 3, 4}, as kept in the tests of the Rust crate
  // rand_xoshiro.
  it('is xoshiro128**', () => {
    const random = SeededRandom.fromState([1, 2, 3, 4])
    expect(Array.from({ length: 10 }, () => random.next32())).toEqual([
      11520, 0, 5927040, 70819200, 2031721883, 1637235492, 1287239034, 3734860849, 3729100597, 4258142804,
    ])
  })

  it('gives the same sequence for the same seed and another for another, also beyond 32 bits', () => {
    const first = (seed: number) => {
      const random = new SeededRandom(seed)
      return Array.from({ length: 5 }, () => random.uniform())
    }
    expect(first(7)).toEqual(first(7))
    const seeds = [0, 1, 2, -1, 2 ** 32, 2 ** 32 + 1, 2 ** 40]
    expect(new Set(seeds.map((seed) => first(seed)[0])).size).toBe(seeds.length)
  })

  // Four standard errors of the mean and of the variance over the draws.
  it('draws normal numbers of mean 0 and variance 1', () => {
    const random = new SeededRandom(1)
    const { mean, variance } = moments(() => random.normal(), 100_000)
    expect(Math.abs(mean)).toBeLessThan(4 / Math.sqrt(1e5))
    expect(Math.abs(variance - 1)).toBeLessThan(4 * Math.sqrt(2 / 1e5))
  })

  it.each([0.3, 4, 9.9, 10, 55, 2000])('draws Poisson numbers of mean and variance %s', (mean) => {
    const random = new SeededRandom(2)
    const found = moments(() => random.poisson(mean), 100_000)
    expect(Math.abs(found.mean - mean)).toBeLessThan(4 * Math.sqrt(mean / 1e5))
    expect(Math.abs(found.variance / mean - 1)).toBeLessThan(4 * Math.sqrt((2 + 1 / mean) / 1e5))
  })

  it('draws each Poisson count as often as the law says, in both methods', () => {
    for (const mean of [3, 12]) {
      const random = new SeededRandom(3)
      const draws = 100_000
      const counts = new Map<number, number>()
      for (let k = 0; k < draws; k++) {
        const value = random.poisson(mean)
        counts.set(value, (counts.get(value) ?? 0) + 1)
      }
      let probability = Math.exp(-mean)
      for (let n = 0; n < 25; n++) {
        const expected = draws * probability
        if (expected > 20) expect(Math.abs((counts.get(n) ?? 0) - expected)).toBeLessThan(4.5 * Math.sqrt(expected))
        probability *= mean / (n + 1)
      }
    }
  })

  it('draws 0 for a Poisson mean of 0, below, or NaN', () => {
    const random = new SeededRandom(4)
    expect([0, -3, Number.NaN].map((mean) => random.poisson(mean))).toEqual([0, 0, 0])
  })

  it('draws whole numbers with both ends included', () => {
    const random = new SeededRandom(5)
    const seen = new Set(Array.from({ length: 200 }, () => random.integer(2, 5)))
    expect([...seen].sort()).toEqual([2, 3, 4, 5])
  })
})
