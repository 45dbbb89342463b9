import { describe, expect, it } from 'vitest'
import { logOddsOf } from '@/lib/science/agreement/posterior'
import {
  factorInWords,
  probabilityBeside,
  probabilityWithOdds,
  weightInWords,
} from '@/lib/science/agreement/weight-words'

describe('a weight in words', () => {
  it.each([
    [Math.log(30), 'speaks strongly for a lens', 'odds times 30'],
    [-Math.log(5), 'speaks clearly against a lens', 'odds divided by 5.0'],
    [Math.log(2), 'speaks somewhat for a lens', 'odds times 2.0'],
    [-Math.log(1.04), 'speaks hardly against a lens', 'odds divided by 1.04'],
    [0, 'says nothing either way', 'odds unchanged'],
    [Math.log(5000), 'speaks strongly for a lens', 'odds times 1000 or more'],
    [-Infinity, 'speaks strongly against a lens', 'odds made zero'],
  ])('%d', (weight, words, factor) => {
    expect(weightInWords(weight)).toBe(words)
    expect(factorInWords(weight)).toBe(factor)
  })
})

describe('a probability', () => {
  it('has two digits, or as many as tell it from 0, 1 and the boundary', () => {
    expect(probabilityBeside(0.5)).toBe('0.50')
    expect(probabilityBeside(0.00004)).toBe('0.00004')
    expect(probabilityBeside(0.9996)).toBe('0.9996')
    expect(probabilityBeside(0.912, 0.914)).toBe('0.912')
    expect(probabilityBeside(1)).toBe('1.00')
  })
})

describe('a probability beside its log odds', () => {
  it('has digits enough that the log odds can be found again from it', () => {
    expect(probabilityWithOdds(0.0244)).toBe('0.0244')
    expect(probabilityWithOdds(0.97916)).toBe('0.9792')
    expect(probabilityWithOdds(1)).toBe('1.00')
    for (let odds = -12; odds <= 12; odds += 0.037) {
      const shown = Number(probabilityWithOdds(1 / (1 + Math.exp(-odds))))
      expect(Math.abs(logOddsOf(shown) - odds)).toBeLessThan(0.0056)
    }
  })
})
