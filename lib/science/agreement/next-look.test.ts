import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  binaryEntropyBits,
  chanceToSettle,
  expectedInformationBits,
  rankCandidates,
  rankGraders,
} from '@/lib/science/agreement/next-look'

const good = { lens: [0.6, 0.3, 0.08, 0.02], notLens: [0.01, 0.04, 0.15, 0.8] }
const poor = { lens: [0.3, 0.3, 0.2, 0.2], notLens: [0.1, 0.2, 0.3, 0.4] }
const blind = { lens: [0.25, 0.25, 0.25, 0.25], notLens: [0.25, 0.25, 0.25, 0.25] }

describe('expectedInformationBits', () => {
  // Capacity of the binary symmetric channel at even odds, 1 - H(e): C. E. Shannon (1948), section 15.
  it('is 1 - H(e) for a grader who errs alike either way, at even odds', () => {
    const rates = { lens: [0.9, 0.1], notLens: [0.1, 0.9] }
    expect(expectedInformationBits(0.5, rates)).toBeCloseTo(1 - binaryEntropyBits(0.1), 12)
    expect(binaryEntropyBits(0.1)).toBeCloseTo(0.468996, 6)
  })

  it('is all there is to know from a perfect grader and nothing from a blind one', () => {
    const perfect = { lens: [1, 0], notLens: [0, 1] }
    expect(expectedInformationBits(0.02, perfect)).toBeCloseTo(binaryEntropyBits(0.02), 12)
    expect(expectedInformationBits(0.02, blind)).toBeCloseTo(0, 12)
    expect([expectedInformationBits(0, good), expectedInformationBits(1, good)]).toEqual([0, 0])
  })

  it('is never negative and never more than the uncertainty', () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 1, noNaN: true }), (p) => {
        const bits = expectedInformationBits(p, good)
        expect(bits).toBeGreaterThanOrEqual(0)
        expect(bits).toBeLessThanOrEqual(binaryEntropyBits(p) + 1e-12)
      }),
    )
  })
})

describe('the next look', () => {
  it('goes to the grader who tells most', () => {
    expect(rankGraders(0.3, [blind, poor, good]).map(({ grader }) => grader)).toEqual([2, 1, 0])
  })

  it('goes to the candidates that are least certain', () => {
    expect(rankCandidates([0.001, 0.4, 0.9999, 0.1, 0.4], good, 3)).toEqual([1, 4, 3])
  })

  it('settles with the probability of the grades that reach a boundary', () => {
    // From even odds only A and N go far enough: A has weight ln 60, N ln(0.02 / 0.8) = -ln 40.
    const chance = chanceToSettle(0, 0.5, good, { upper: Math.log(50), lower: -Math.log(30) })
    expect(chance).toBeCloseTo(0.5 * (0.6 + 0.01) + 0.5 * (0.02 + 0.8), 12)
    expect(chanceToSettle(0, 0.5, blind, { upper: 1, lower: -1 })).toBe(0)
  })
})
