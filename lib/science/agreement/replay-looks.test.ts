import { describe, expect, it } from 'vitest'
import { CANNOT_JUDGE } from '@/lib/science/agreement/grade-table'
import { gradeWeights } from '@/lib/science/agreement/posterior'
import { replayByMean, replayByReliability, type LookSeries } from '@/lib/science/agreement/replay-looks'
import { reachedBoundary, waldBoundaries } from '@/lib/science/agreement/sequential-test'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'

const RATES = { lens: [0.45, 0.3, 0.17, 0.08], notLens: [0.01, 0.05, 0.24, 0.7] }
const RULE = { falseConfirmed: 0.001, missedLens: 0.05, leastGrades: 2, mostLooks: 10 }
const U = CANNOT_JUDGE

function seriesOf(...looks: { grade: number; weight: number }[][]): LookSeries {
  const start = Int32Array.from({ length: looks.length + 1 }, (_, at) => looks.slice(0, at).flat().length)
  const all = looks.flat()
  return {
    start,
    grade: Uint8Array.from(all, ({ grade }) => grade),
    weight: Float64Array.from(all, ({ weight }) => weight),
  }
}

const weighing = (...weights: number[]) =>
  weights.map((weight) => ({ grade: weight === 0 ? U : weight > 0 ? 0 : 3, weight }))
const graded = (...grades: number[]) => grades.map((grade) => ({ grade, weight: 0 }))

/** Chance that a candidate is confirmed, summed over every sequence of grades: sequences of the same counts are one. */
function chanceConfirmed(rates: readonly number[]): number {
  const weights = gradeWeights(RATES)
  const boundaries = waldBoundaries(RULE)
  let open = new Map<string, { counts: number[]; chance: number }>([['0,0,0,0', { counts: [0, 0, 0, 0], chance: 1 }]])
  let confirmed = 0
  for (let look = 1; look <= RULE.mostLooks; look++) {
    const next: typeof open = new Map()
    for (const { counts, chance } of open.values()) {
      for (const [grade, rate] of rates.entries()) {
        const then = counts.with(grade, counts[grade] + 1)
        const evidence = then.reduce((sum, n, at) => sum + n * weights[at], 0)
        const reached = look >= RULE.leastGrades ? reachedBoundary(evidence, boundaries) : null
        if (reached === 'confirm') confirmed += chance * rate
        if (reached !== null) continue
        const known = next.get(then.join())
        next.set(then.join(), { counts: then, chance: (known?.chance ?? 0) + chance * rate })
      }
    }
    open = next
  }
  return confirmed
}

function drawn(rates: readonly number[], series: number, looks: number, seed: number): LookSeries {
  const random = new SeededRandom(seed)
  const weights = gradeWeights(RATES)
  const upTo = rates.map((_, grade) => rates.slice(0, grade + 1).reduce((sum, rate) => sum + rate, 0)).with(-1, 1)
  const grade = new Uint8Array(series * looks)
  for (let look = 0; look < grade.length; look++) {
    const at = random.uniform()
    while (at >= upTo[grade[look]]) grade[look] += 1
  }
  return {
    start: Int32Array.from({ length: series + 1 }, (_, at) => at * looks),
    grade,
    weight: Float64Array.from(grade, (g) => weights[g]),
  }
}

describe('looks replayed by reliability', () => {
  it.each([
    ['lenses', RATES.lens, 20_000],
    ['what is none', RATES.notLens, 200_000],
  ] as const)('confirm as many of %s as candidates that get no look after the last', (_, rates, series) => {
    const chance = chanceConfirmed(rates)
    const { upper } = waldBoundaries(RULE)
    for (const looks of [10, 12, 20]) {
      const { reach, ended } = replayByReliability(drawn(rates, series, looks, looks), RULE)
      const confirmed = reach.reduce((sum, one) => sum + (one >= upper ? 1 : 0), 0) / series
      const error = Math.sqrt((chance * (1 - chance)) / series)
      expect(Math.abs(confirmed - chance)).toBeLessThan(4 * error)
      expect(ended.every((one) => one === 1)).toBe(true)
    }
  })

  it('reach the most evidence before they are set aside, with the least grades in', () => {
    const { reach, ended } = replayByReliability(
      seriesOf(weighing(5, 3, -4), weighing(9), weighing(1, -4, 20), weighing(-4, 1.5, 1), []),
      RULE,
    )
    expect([...reach]).toEqual([8, -Infinity, -Infinity, -1.5, -Infinity])
    // Only the third was set aside: -4 alone decides nothing below two grades, and -2.5 is above the boundary of -2.995.
    expect([...ended]).toEqual([0, 0, 1, 0, 0])
  })

  it('count a look that could not judge as a look and not as a grade', () => {
    const rule = { ...RULE, mostLooks: 3 }
    const { reach, ended } = replayByReliability(seriesOf(weighing(7, 0, 0, 7), weighing(4, 0, 4, 9)), rule)
    expect([...reach]).toEqual([-Infinity, 8])
    expect([...ended]).toEqual([1, 1])
  })

  it('are refused for a rule that cannot be used', () => {
    expect(() => replayByReliability(seriesOf(), { ...RULE, falseConfirmed: 0 })).toThrow('must be between 0 and 1')
  })
})

describe('looks replayed by the mean', () => {
  const rule = { gradesWanted: 3, leastGrades: 2, confirmMean: 2, setAsideMean: 1, splitSpread: 1 }

  it('reach the mean of the looks that are wanted, whatever came after them', () => {
    const { reach, ended } = replayByMean(seriesOf(graded(0, 0, 1, 3, 3), graded(0, 1), graded(2, U, 1)), rule)
    expect([...reach]).toEqual([8 / 3, -Infinity, 1.5])
    expect([...ended]).toEqual([1, 0, 1])
  })

  it('reach nothing where they spread too far or too few could judge', () => {
    const { reach, ended } = replayByMean(seriesOf(graded(0, 0, 3), graded(0, U, U)), rule)
    expect([...reach]).toEqual([-Infinity, -Infinity])
    expect([...ended]).toEqual([1, 1])
  })

  it('are refused for a rule that cannot be used', () => {
    expect(() => replayByMean(seriesOf(), { ...rule, leastGrades: 9 })).toThrow('above the number wanted')
  })
})
