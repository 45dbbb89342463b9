import { describe, expect, it } from 'vitest'
import { clopperPearsonInterval, wilsonInterval, type Interval } from '@/lib/science/agreement/binomial-intervals'
import { drawBinomial } from '@/lib/science/agreement/multinomial'
import { promisedQuality, purityOf, ruleQuality } from '@/lib/science/agreement/rule-quality'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'

const counts = { lenses: 80, lensesConfirmed: 72, nonLenses: 400, nonLensesConfirmed: 4 }

describe('ruleQuality', () => {
  // Arithmetic of Bayes' rule by hand: 0.02 * 0.9 / (0.02 * 0.9 + 0.98 * 0.01) = 0.018 / 0.0278.
  it('corrects the purity for the share of lenses, which is not that among the stamps', () => {
    const { completeness, falsePositiveRate, purity } = ruleQuality(counts, 0.02)
    expect(completeness.value).toBe(0.9)
    expect(falsePositiveRate.value).toBe(0.01)
    expect(purity.value).toBeCloseTo(0.018 / 0.0278, 12)
    expect(ruleQuality(counts, 80 / 480).purity.value).toBeCloseTo(72 / 76, 12)
  })

  it('gives Wilson or Clopper-Pearson intervals of completeness and false positive rate', () => {
    expect(ruleQuality(counts, 0.02).completeness.interval).toEqual(wilsonInterval(72, 80))
    const exact = ruleQuality(counts, 0.02, { intervals: 'Clopper-Pearson', level: 0.9 })
    expect(exact.falsePositiveRate.interval).toEqual(clopperPearsonInterval(4, 400, 0.9))
  })

  it('takes the ends of the purity where completeness and false positives are both at theirs', () => {
    const level = Math.sqrt(0.95)
    const [c, f] = [wilsonInterval(72, 80, level), wilsonInterval(4, 400, level)] as Interval[]
    expect(ruleQuality(counts, 0.02).purity.interval).toEqual({
      low: purityOf(c.low, f.high, 0.02),
      high: purityOf(c.high, f.low, 0.02),
    })
    const wider = ruleQuality(counts, 0.02, { lensShareRange: { low: 0.01, high: 0.03 } }).purity.interval as Interval
    expect(wider.low).toBe(purityOf(c.low, f.high, 0.01))
    expect(wider.high).toBe(purityOf(c.high, f.low, 0.03))
  })

  // Brown, Cai & DasGupta (2001), section 4.2.1: Clopper-Pearson never covers less than its level; so neither do its ends
  // taken together.
  it('covers the true purity at least as often as it says, in 2000 seeded campaigns', () => {
    const random = new SeededRandom(7)
    const truth = purityOf(0.85, 0.01, 0.05) as number
    let covered = 0
    for (let campaign = 0; campaign < 2000; campaign++) {
      const drawn = {
        lenses: 60,
        lensesConfirmed: drawBinomial(random, 60, 0.85),
        nonLenses: 300,
        nonLensesConfirmed: drawBinomial(random, 300, 0.01),
      }
      const { low, high } = ruleQuality(drawn, 0.05, { intervals: 'Clopper-Pearson' }).purity.interval as Interval
      if (low <= truth && truth <= high) covered += 1
    }
    expect(covered / 2000).toBeGreaterThanOrEqual(0.94)
  })

  it('says nothing of what was not counted', () => {
    const none = ruleQuality({ lenses: 0, lensesConfirmed: 0, nonLenses: 5, nonLensesConfirmed: 0 }, 0.02)
    expect(none.completeness).toEqual({ value: null, interval: null })
    expect(none.purity).toEqual({ value: null, interval: null })
    const never = ruleQuality({ lenses: 5, lensesConfirmed: 0, nonLenses: 5, nonLensesConfirmed: 0 }, 0.02)
    expect(never.purity.value).toBeNull()
    expect(never.purity.interval).toEqual({ low: 0, high: 1 })
  })

  it('refuses counts and shares that cannot be', () => {
    expect(() => ruleQuality({ ...counts, lensesConfirmed: 81 }, 0.02)).toThrow('from 0 to 80')
    expect(() => ruleQuality(counts, 1.2)).toThrow('between 0 and 1')
    expect(() => ruleQuality(counts, 0.02, { lensShareRange: { low: 0.03, high: 0.04 } })).toThrow('around it')
  })
})

describe('promisedQuality', () => {
  it('is the mean probability of the confirmed and their share of all expected lenses', () => {
    const probabilities = [0.9, 0.8, 0.2, 0.1]
    const { confirmed, completeness, purity } = promisedQuality(probabilities, (at) => probabilities[at] > 0.5)
    expect(confirmed).toBe(2)
    expect(completeness).toBeCloseTo(0.85, 12)
    expect(purity).toBeCloseTo(0.85, 12)
  })

  it('is null where nothing is confirmed or nothing can be a lens', () => {
    expect(promisedQuality([0, 0], () => false)).toEqual({ confirmed: 0, completeness: null, purity: null })
  })
})
