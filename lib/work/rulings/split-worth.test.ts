import { describe, expect, it } from 'vitest'
import { splitOrderOf, worthInWords, worthOf } from './split-worth'

const split = (more: object) => ({ probability: null, mean: null, spread: null, ...more })
const RULE = { confirmMean: 2, setAsideMean: 1 }

describe('what settling a split is worth', () => {
  it('by reliability is the entropy of the probability: one bit at a half, the same on both sides, none when sure', () => {
    expect(worthOf(split({ probability: 0.5 }), null)).toBe(1)
    // H(0.11) = 0.4999 bits, the capacity example of C. E. Shannon's binary symmetric channel.
    expect(worthOf(split({ probability: 0.11 }), null)).toBeCloseTo(0.4999, 4)
    expect(worthOf(split({ probability: 0.89 }), null)).toBeCloseTo(0.4999, 4)
    expect(worthOf(split({ probability: 1 }), null)).toBe(0)
  })

  it('by the mean is its distance from the nearer threshold, negative beyond it', () => {
    expect(worthOf(split({ mean: 1.5, spread: 1.5 }), RULE)).toBe(0.5)
    expect(worthOf(split({ mean: 1.9, spread: 0.4 }), RULE)).toBeCloseTo(0.1)
    expect(worthOf(split({ mean: 2.25, spread: 1.3 }), RULE)).toBe(-0.25)
  })

  it('is unknown without a grade', () => {
    expect(worthOf(split({}), RULE)).toBeNull()
    expect(worthOf(split({}), null)).toBeNull()
  })

  it('is said in words', () => {
    expect(worthInWords(split({ probability: 0.5 }), null)).toBe('worth 1.00 bit')
    expect(worthInWords(split({ mean: 1.5 }), RULE)).toBe('0.50 from a threshold')
    expect(worthInWords(split({ mean: 2.5 }), RULE)).toBe('split by spread alone')
    expect(worthInWords(split({}), RULE)).toBe('no grade to go by')
    expect(worthInWords(split({}), null)).toBe('no probability yet')
  })

  it('is the order where the address names none that is known', () => {
    expect(splitOrderOf('spread')).toBe('spread')
    expect(splitOrderOf('score')).toBe('worth')
    expect(splitOrderOf(undefined)).toBe('worth')
  })
})
