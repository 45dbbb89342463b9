import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  CoordinateError,
  formatDeclination,
  formatRightAscension,
  parseDeclination,
  parseRightAscension,
} from '@/lib/science/sky/coordinates'

// Expected values follow from 1 h = 15 degrees and the definition of sexagesimal notation; worked by hand.
describe('formatRightAscension', () => {
  it.each([
    [3.144, '00ʰ12ᵐ34.56ˢ'],
    [0, '00ʰ00ᵐ00.00ˢ'],
    [359.9999999, '00ʰ00ᵐ00.00ˢ'],
    [15 * (1 + 59.999999 / 3600), '01ʰ01ᵐ00.00ˢ'],
    [-15, '23ʰ00ᵐ00.00ˢ'],
    [360, '00ʰ00ᵐ00.00ˢ'],
    [NaN, '–'],
  ])('writes %d as %s', (value, text) => {
    expect(formatRightAscension(value)).toBe(text)
  })

  it('writes as many decimals as asked', () => {
    expect(formatRightAscension(3.144, 0)).toBe('00ʰ12ᵐ35ˢ')
  })
})

describe('formatDeclination', () => {
  it.each([
    [-(1 + 23 / 60 + 45.6 / 3600), '−01°23′45.6″'],
    [0, '+00°00′00.0″'],
    [-0.0001, '−00°00′00.4″'],
    [59.99999 / 60, '+01°00′00.0″'],
    [90, '+90°00′00.0″'],
    [Infinity, '–'],
  ])('writes %d as %s', (value, text) => {
    expect(formatDeclination(value)).toBe(text)
  })
})

describe('parseRightAscension', () => {
  it.each([
    ['3.144', 3.144],
    ['187.5d', 187.5],
    ['1.875e2', 187.5],
    ['12.5h', 187.5],
    ['12:30:00', 187.5],
    ['12 30 00.0', 187.5],
    ['12h30m', 187.5],
    ['12h 30m 00s', 187.5],
    ['12ʰ30ᵐ00.00ˢ', 187.5],
    ['24:00:00', 0],
    ['360', 0],
  ])('reads %s', (text, value) => {
    expect(parseRightAscension(text)).toBeCloseTo(value, 12)
  })

  it.each([
    '',
    'north',
    '12:60:00',
    '12:30:61',
    '24:00:01',
    '361',
    '-1',
    '12.5:30',
    '12d30m00s',
    '1:2:3:4',
    '12::30',
    'NaN',
    '1e999',
  ])('refuses "%s"', (text) => {
    expect(() => parseRightAscension(text)).toThrow(CoordinateError)
  })
})

describe('parseDeclination', () => {
  it.each([
    ['-1.396', -1.396],
    ['+01:30:00', 1.5],
    ['−01 30 00', -1.5],
    ['-00:30:00', -0.5],
    ['-01d30m00s', -1.5],
    ['-01°30\'00"', -1.5],
    ['−01°30′00.0″', -1.5],
    ['90', 90],
  ])('reads %s', (text, value) => {
    expect(parseDeclination(text)).toBeCloseTo(value, 12)
  })

  it.each(['', 'x', '90:00:01', '-91', '10:60', '12h30m', '1:2:3:4'])('refuses "%s"', (text) => {
    expect(() => parseDeclination(text)).toThrow(CoordinateError)
  })

  it('reads back what is displayed, to the digits displayed', () => {
    const degrees = fc.double({ min: -90, max: 90, noNaN: true })
    fc.assert(
      fc.property(degrees, (value) => {
        expect(Math.abs(parseDeclination(formatDeclination(value, 3)) - value) * 3600).toBeLessThan(0.00051)
        const ra = parseRightAscension(formatRightAscension(value + 90, 3))
        expect(Math.abs(ra - (value + 90)) * 240).toBeLessThan(0.00051)
      }),
      { seed: 7 },
    )
  })
})
