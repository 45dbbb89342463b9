import { describe, expect, it } from 'vitest'
import { arcsec, delayInWords, inField, magnificationInWords, powerOfTen, threeDigits, withError } from './in-figures'

describe('figures', () => {
  it.each([
    [1.2345, 0.0421, '1.234 ± 0.042″'],
    [12.34, 1.26, '12.3 ± 1.3″'],
    [1.2345, 0.00001, '1.2345 ± 0.0000″'],
    [-0.5, 0.1, '−0.50 ± 0.10″'],
    [1.2345, null, '1.234″'],
  ])('%d with an error of %d has as many digits as the error', (value, error, text) => {
    expect(withError(value, error, '″')).toBe(text)
  })

  it('have no minus before a zero and one power of ten for a mass', () => {
    expect(arcsec(-0.001)).toBe('0.00″')
    expect(arcsec(-0.01)).toBe('−0.01″')
    expect(powerOfTen(2.34e11)).toBe('2.34 × 10¹¹')
    expect(threeDigits(2834.8)).toBe('2830')
  })

  it('of delays are in what they are planned by', () => {
    expect([0, 0.001, 0.5, 12.34, 4000].map(delayInWords)).toEqual([
      'first',
      '< 0.1 hours',
      '12.0 hours',
      '12.3 days',
      '11 years',
    ])
  })

  it('of magnifications say where there is no bound', () => {
    expect([5, -3.04, 12345, -12345, null].map(magnificationInWords)).toEqual([
      '5.0',
      '−3.0',
      '> 1000',
      '< −1000',
      'no bound',
    ])
  })
})

it('a field shows no minus before a zero and keeps a plain one before a number', () => {
  expect([-0.0004, -0, 0.0004, -0.02, -12.5].map((value) => inField(value, 2))).toEqual([
    '0.00',
    '0.00',
    '0.00',
    '-0.02',
    '-12.50',
  ])
})
