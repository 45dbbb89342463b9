import { describe, expect, it } from 'vitest'
import { coefficient, coefficientWithInterval, paceInWords, percentOf, secondsInWords, shareInWords } from './words'

describe('numbers of the Agreement page in words', () => {
  it('are never 0 or 100 per cent unless they are', () => {
    expect([0, 0.001, 0.5, 0.999, 1].map(percentOf)).toEqual(['0 %', '1 %', '50 %', '99 %', '100 %'])
    expect(shareInWords({ value: 0.91, interval: { low: 0.84, high: 0.96 } })).toBe('91 % (84 to 96 %)')
  })

  it('have a true minus, and no minus before zero', () => {
    expect([-0.214, -0.001, 0.5, null].map(coefficient)).toEqual(['−0.21', '0.00', '0.50', '–'])
    expect(coefficientWithInterval(0.6, { low: -0.1, high: 0.9 })).toBe('0.60 (−0.10 to 0.90)')
    expect(coefficientWithInterval(0.6, null)).toBe('0.60')
  })

  it('have their units', () => {
    expect([3.24, 12.6, 59.6, 65, 119.6].map(secondsInWords)).toEqual([
      '3.2 s',
      '13 s',
      '1 min 0 s',
      '1 min 5 s',
      '2 min 0 s',
    ])
    expect([1.23, 1204].map(paceInWords)).toEqual(['1.2', '1,204'])
  })
})
