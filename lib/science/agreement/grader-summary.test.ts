import { describe, expect, it } from 'vitest'
import { jeffreysInterval, type Interval } from '@/lib/science/agreement/binomial-intervals'
import { fitDawidSkene } from '@/lib/science/agreement/dawid-skene'
import { groupByCandidate } from '@/lib/science/agreement/grade-table'
import { summariseGraders } from '@/lib/science/agreement/grader-summary'
import { LENS_MODEL } from '@/lib/science/agreement/lens-model'

/** Twenty lenses of which a grader sees 17, twenty others of which 19 are seen as such; all truths known. */
const truth = Array.from({ length: 40 }, (_, stamp) => (stamp < 20 ? 0 : 1))
const gradeOf = Uint8Array.from({ length: 40 }, (_, stamp) =>
  stamp < 17 ? stamp % 2 : stamp < 39 ? 2 + (stamp % 2) : 0,
)
const table = groupByCandidate({
  candidates: 40,
  graders: 1,
  grades: 4,
  candidateOf: Int32Array.from({ length: 40 }, (_, stamp) => stamp),
  graderOf: new Int32Array(40),
  gradeOf,
})
const quarter = new Array<number>(8).fill(0.25)

describe('summariseGraders', () => {
  const fit = fitDawidSkene(table, { ...LENS_MODEL, pseudoCounts: quarter, shares: [0.5, 0.5], truth })
  const [grader] = summariseGraders(fit, quarter)

  // With a half pseudo-count on each side the interval is Jeffreys': Brown, Cai & DasGupta (2001), section 3.1.3.
  it('gives the share of lenses seen with Jeffreys’ interval where all truths are known', () => {
    expect(grader.lenses).toBe(20)
    expect(grader.lensesSeen.value).toBeCloseTo(17.5 / 21, 12)
    const jeffreys = jeffreysInterval(17, 20) as Interval
    expect(grader.lensesSeen.interval.low).toBeCloseTo(jeffreys.low, 10)
    expect(grader.lensesSeen.interval.high).toBeCloseTo(jeffreys.high, 10)
    expect(grader.nonLensesSeen.value).toBeCloseTo(19.5 / 21, 12)
  })

  it('says what a look tells', () => {
    expect(grader.bitsPerLook).toBeGreaterThan(0.3)
    expect(grader.bitsPerLook).toBeLessThan(1)
    expect(grader.weights[0]).toBeGreaterThan(0)
    expect(grader.weights[3]).toBeLessThan(0)
  })

  it('refuses fits that it cannot read', () => {
    const four = fitDawidSkene(table, { classes: 4, pseudoCounts: 1, shares: 'estimated' })
    expect(() => summariseGraders(four)).toThrow('4 classes')
    expect(() => summariseGraders(fit, quarter, 1)).toThrow('between 0 and 1')
  })
})
