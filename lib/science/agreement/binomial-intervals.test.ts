import { describe, expect, it } from 'vitest'
import { readFixture } from '@/lib/science/agreement/_fixtures'
import {
  clopperPearsonInterval,
  jeffreysInterval,
  wilsonContinuityInterval,
  wilsonInterval,
} from '@/lib/science/agreement/binomial-intervals'
import { normalQuantile } from '@/lib/science/agreement/quantiles'

const reference = readFixture('binomial-intervals.json')

const METHODS = {
  wilson: wilsonInterval,
  wilson_continuity: wilsonContinuityInterval,
  clopper_pearson: clopperPearsonInterval,
  jeffreys: jeffreysInterval,
}
type Method = keyof typeof METHODS
const methods = Object.entries(METHODS) as [Method, (typeof METHODS)[Method]][]

describe.each(methods)('the interval %s', (method, interval) => {
  // scipy 1.10.1 and statsmodels 0.13.5, to 12 digits.
  it.each(reference.rows)('equals the reference libraries for $x of $n at 95 %', (row) => {
    const result = interval(row.x, row.n)
    expect(result?.low).toBeCloseTo(row[method][0], 9)
    expect(result?.high).toBeCloseTo(row[method][1], 9)
  })

  it('equals them at other levels', () => {
    for (const row of reference.other_levels) {
      const expected = (row as Partial<Record<Method, number[]>>)[method]
      if (!expected) continue
      expect(interval(row.x, row.n, row.level)?.low).toBeCloseTo(expected[0], 9)
      expect(interval(row.x, row.n, row.level)?.high).toBeCloseTo(expected[1], 9)
    }
  })

  it('mirrors itself when successes and failures change places', () => {
    for (let x = 0; x <= 17; x++) {
      expect(interval(x, 17)?.low).toBeCloseTo(1 - (interval(17 - x, 17)?.high as number), 12)
    }
  })

  it('does not exist for no trials, and refuses impossible numbers', () => {
    expect(interval(0, 0)).toBeNull()
    expect(() => interval(4, 3)).toThrow('The number of successes is 4; it must be a whole number from 0 to 3.')
    expect(() => interval(-1, 3)).toThrow(RangeError)
    expect(() => interval(1.5, 3)).toThrow(RangeError)
    expect(() => interval(1, NaN)).toThrow(RangeError)
    expect(() => interval(1, 3, 1)).toThrow('The level is 1; it must be between 0 and 1.')
  })

  it('stays inside 0 to 1 and around the proportion for a hundred thousand trials', () => {
    const result = interval(250, 100_000)
    expect(result?.low).toBeGreaterThan(0.002)
    expect(result?.low).toBeLessThan(0.0025)
    expect(result?.high).toBeGreaterThan(0.0025)
    expect(result?.high).toBeLessThan(0.003)
  })
})

describe('published digits', () => {
  // Newcombe (1998), Statistics in Medicine 17, 857, Table I: 81/263, 15/148, 0/20, 1/29, printed to four decimals.
  it('equal Table I of Newcombe (1998) for his four proportions', () => {
    const printed = reference.rows.filter((row) => row.published_4dp)
    expect(printed.map(({ x, n }) => `${x}/${n}`)).toEqual(['81/263', '15/148', '0/20', '1/29'])
    for (const row of printed) {
      for (const [method, [low, high]] of Object.entries(row.published_4dp as Record<string, number[]>)) {
        const result = METHODS[method as Method](row.x, row.n)
        expect(result?.low.toFixed(4)).toBe(low.toFixed(4))
        expect(result?.high.toFixed(4)).toBe(high.toFixed(4))
      }
    }
  })

  it('the normal quantile of 0.975 is 1.959963984540054 and mirrors at one half', () => {
    expect(normalQuantile(0.975)).toBeCloseTo(reference.z, 12)
    expect(normalQuantile(0.025)).toBe(-normalQuantile(0.975))
    expect(normalQuantile(0.5)).toBe(0)
    expect(normalQuantile(1)).toBeNaN()
  })
})
