import { describe, expect, it } from 'vitest'
import { readFixture, readPanel } from '@/lib/science/agreement/_fixtures'
import { bootstrapInterval, patternsOf, type BootstrapInterval } from '@/lib/science/agreement/bootstrap'
import { cohenKappa } from '@/lib/science/agreement/cohen-kappa'
import { fleissKappa } from '@/lib/science/agreement/fleiss-kappa'
import { gwetAc } from '@/lib/science/agreement/gwet-ac'
import { krippendorffAlphaFromCounts } from '@/lib/science/agreement/krippendorff-alpha'

const GRADES = [0, 1, 2, 3]
const panel = patternsOf(
  readPanel().ratings.map((row) => GRADES.map((grade) => row.filter((rating) => rating === grade).length)),
)
const fleiss = readFixture('fleiss-1971.json')

describe('bootstrapInterval', () => {
  // The mean of n zeros and ones has standard deviation sqrt(p (1 - p) / n); a percentile interval of it is normal's.
  it('is that of the normal distribution for a share of many', () => {
    const interval = bootstrapInterval([4000, 6000], ([yes]) => yes / 10_000, { seed: 3, resamples: 4000 })
    const halfWidth = 1.959964 * Math.sqrt((0.4 * 0.6) / 10_000)
    expect(Math.abs((interval as BootstrapInterval).low - (0.4 - halfWidth))).toBeLessThan(0.001)
    expect(Math.abs((interval as BootstrapInterval).high - (0.4 + halfWidth))).toBeLessThan(0.001)
  })

  // Gwet (2021), p. 165: AC1 0.50209, standard error 0.10343 by irrCAC. The bootstrap has no finite-sample correction and
  // so is expected to agree with it to some tens of per cent only.
  it('has a width near the standard error that irrCAC gives for AC1', () => {
    const set = readFixture('gwet-ac.json').sets[1]
    const rows = (set.ratings ?? []).map((row) =>
      GRADES.map((grade) => row.filter((rating) => rating === grade).length),
    )
    const { counts, multiplicity } = patternsOf(rows)
    const interval = bootstrapInterval(multiplicity, (times) => gwetAc(counts, 'identity', times).ac, { seed: 1 })
    const { low, high } = interval as BootstrapInterval
    expect((high - low) / (2 * 1.96 * 0.10343)).toBeGreaterThan(0.75)
    expect((high - low) / (2 * 1.96 * 0.10343)).toBeLessThan(1.25)
  })

  const statistics: [string, (times: ArrayLike<number>) => number | null][] = [
    ['alpha', (times) => krippendorffAlphaFromCounts(panel.counts, GRADES, 'ordinal', times).alpha],
    ['Fleiss’ kappa', (times) => fleissKappa(panel.counts, times).kappa],
    ['AC2', (times) => gwetAc(panel.counts, 'quadratic', times).ac],
  ]

  it.each(statistics)('holds %s of the seeded panel inside, the same for the same seed', (_, statistic) => {
    const value = statistic(panel.multiplicity) as number
    const interval = bootstrapInterval(panel.multiplicity, statistic, { seed: 8 }) as BootstrapInterval
    expect(interval.low).toBeLessThan(value)
    expect(interval.high).toBeGreaterThan(value)
    expect(interval.high - interval.low).toBeLessThan(0.3)
    expect(bootstrapInterval(panel.multiplicity, statistic, { seed: 8 })).toEqual(interval)
    expect(bootstrapInterval(panel.multiplicity, statistic, { seed: 9 })).not.toEqual(interval)
  })

  // J. L. Fleiss (1971), Table 1: kappa 0.430 of 30 patients.
  it('holds the published kappa of Fleiss inside', () => {
    const { counts, multiplicity } = patternsOf(fleiss.counts)
    const interval = bootstrapInterval(multiplicity, (times) => fleissKappa(counts, times).kappa, { seed: 1971 })
    expect((interval as BootstrapInterval).low).toBeLessThan(fleiss.expected.published_kappa)
    expect((interval as BootstrapInterval).high).toBeGreaterThan(fleiss.expected.published_kappa)
  })

  it('works on the cells of a table of two graders', () => {
    const table = [40, 9, 6, 45]
    const kappa = (cells: ArrayLike<number>) => cohenKappa([[cells[0], cells[1]], [cells[2], cells[3]]]).kappa // prettier-ignore
    const interval = bootstrapInterval(table, kappa, { seed: 4 }) as BootstrapInterval
    expect(interval.low).toBeLessThan(0.7)
    expect(interval.high).toBeGreaterThan(0.7)
  })

  it('narrows with the level and with the square root of the candidates', () => {
    const width = (scale: number, level: number) => {
      const interval = bootstrapInterval([30 * scale, 70 * scale], ([a, b]) => a / (a + b), { seed: 5, level })
      return (interval as BootstrapInterval).high - (interval as BootstrapInterval).low
    }
    expect(width(1, 0.8)).toBeLessThan(width(1, 0.95))
    expect(width(1, 0.95) / width(100, 0.95)).toBeGreaterThan(8)
  })

  it('is null without candidates or where the statistic is mostly undefined, and counts what it left out', () => {
    expect(bootstrapInterval([], () => 1, { seed: 1 })).toBeNull()
    expect(bootstrapInterval([5], () => null, { seed: 1 })).toBeNull()
    const now = bootstrapInterval([1, 9], ([rare]) => (rare === 0 ? null : rare), { seed: 1 })
    expect((now as BootstrapInterval).undefinedResamples).toBeGreaterThan(200)
  })

  it('refuses a level or a number of resamples that makes no interval', () => {
    expect(() => bootstrapInterval([1], () => 1, { seed: 1, level: 1 })).toThrow('between 0 and 1')
    expect(() => bootstrapInterval([1], () => 1, { seed: 1, resamples: 1 })).toThrow('2 resamples')
  })
})

describe('statistics of grouped candidates', () => {
  it.each(statistics())('equal those of the candidates one by one: %s', (_, grouped, single) => {
    expect(grouped).toBeCloseTo(single as number, 12)
  })

  function statistics(): [string, number | null, number | null][] {
    const { counts, multiplicity } = patternsOf(
      panel.counts.flatMap((row, at) => Array(panel.multiplicity[at]).fill(row)),
    )
    const all = counts.flatMap((row, at) => Array<number[]>(multiplicity[at]).fill(row))
    return [
      [
        'alpha',
        krippendorffAlphaFromCounts(counts, GRADES, 'ordinal', multiplicity).alpha,
        krippendorffAlphaFromCounts(all, GRADES, 'ordinal').alpha,
      ],
      ['nominal alpha', krippendorffAlphaFromCounts(counts, GRADES, 'nominal', multiplicity).alpha, krippendorffAlphaFromCounts(all, GRADES, 'nominal').alpha], // prettier-ignore
      ['Fleiss’ kappa', fleissKappa(counts, multiplicity).kappa, fleissKappa(all).kappa],
      ['AC1', gwetAc(counts, 'identity', multiplicity).ac, gwetAc(all).ac],
    ]
  }
})
