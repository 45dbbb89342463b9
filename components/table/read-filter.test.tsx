import { expect, it } from 'vitest'
import { readFilter } from './read-filter'
import { parsePosition, parseRadius, readRegion } from './sky-region'

const condition = (...asked: Parameters<typeof readFilter>) => {
  const read = readFilter(...asked)
  return read && 'condition' in read ? read.condition : read
}

it('asks nothing by blank text', () => {
  for (const kind of ['text', 'range', 'date', 'ra', 'dec', ['A']] as const) expect(readFilter(kind, '  ')).toBeNull()
})

it('looks for every part between commas', () => {
  expect(condition('text', 'arc, ring,')).toEqual({ kind: 'contains', parts: ['arc', 'ring'] })
})

it.each([
  ['>= 2', { least: 2, most: null, above: false }],
  ['< 0.5', { least: null, most: 0.5, below: true }],
  ['1..3', { least: 1, most: 3 }],
] as const)('reads the numbers %s', (text, expected) => {
  expect(condition('range', text)).toMatchObject({ kind: 'range', ...expected })
})

it('finds what has no value, and what has any', () => {
  expect(condition('range', 'none')).toEqual({ kind: 'missing' })
  expect(condition('date', 'Any')).toEqual({ kind: 'present' })
})

it.each([
  ['2026', '2026-01-01', '2027-01-01'],
  ['2024-02', '2024-02-01', '2024-03-01'],
  ['2026-12-31', '2026-12-31', '2027-01-01'],
  ['2026-10..2026-11', '2026-10-01', '2026-12-01'],
  ['>= 2026-11', '2026-11-01', null],
  ['> 2026-11', '2026-12-01', null],
  ['<= 2026-11', null, '2026-12-01'],
  ['< 2026-11-03', null, '2026-11-03'],
])('reads the days %s', (text, least, most) => {
  expect(condition('date', text)).toEqual({ kind: 'range', least, most, below: true })
})

it.each([
  ['150..151', { from: 150, to: 151 }],
  ['10h..10h30m', { from: 150, to: 157.5 }],
  ['10:00 to 10:30:00', { from: 150, to: 157.5 }],
  ['359..1', { from: 359, to: 1 }],
  ['350..360', { from: 350, to: 360 }],
])('reads the right ascensions %s, eastward from the first', (text, expected) => {
  expect(condition('ra', text)).toEqual({ kind: 'turn', ...expected })
})

it('reads declinations in degrees and sexagesimal, with the sign people type', () => {
  expect(condition('dec', '−2..+2')).toEqual({ kind: 'range', least: -2, most: 2 })
  expect(condition('dec', '-01:30..00:00')).toEqual({ kind: 'range', least: -1.5, most: 0 })
  expect(condition('dec', '> 60')).toMatchObject({ least: 60, most: 90, above: true })
})

it.each([
  ['range', 'about 2', /“about 2” is no range of numbers/],
  ['range', '3..1', /write 1\.\.3/],
  ['date', '2026-02-30', /no day or range of days/],
  ['date', '2026-11..2026-10', /ends before it begins/],
  ['ra', '25h..26h', /not between 0 and 24 hours/],
  ['ra', 'north', /is no range/],
  ['dec', '2..-2', /write the southern end first/],
  ['dec', '80..100', /not between -90 and 90/],
] as const)('says of the %s filter %s what is wrong with it', (kind, text, sentence) => {
  expect(readFilter(kind, text)).toEqual({ problem: expect.stringMatching(sentence) })
})

it('passes over choices that a column does not have', () => {
  expect(condition(['A', 'B'], 'B,Z')).toEqual({ kind: 'among', values: ['B'] })
  expect(readFilter(['A', 'B'], 'Z')).toBeNull()
})

// 10h00m24s is 150.1 degrees, +02d12m is 2.2 degrees.
it.each([
  '150.1 2.2',
  '150.1, +2.2',
  '150.1+2.2',
  '10:00:24 +02:12:00',
  '10 00 24 02 12 00',
  '10h00m24s +02d12m00s',
  'SWS J100024.00+021200.0',
])('reads the position %s', (text) => {
  const { raDeg, decDeg } = parsePosition(text)
  expect(raDeg).toBeCloseTo(150.1, 9)
  expect(decDeg).toBeCloseTo(2.2, 9)
})

it.each([
  ['30', 30],
  ['30"', 30],
  ['1.5 arcmin', 90],
  ['2′', 120],
  ['0.5 deg', 1800],
  ['.5°', 1800],
  ['far', null],
  ['-3', null],
])('reads the radius %s', (text, arcsec) => {
  expect(parseRadius(text)).toBe(arcsec)
})

it('says of half a region which half is missing, and makes a cone of a whole one', () => {
  expect(readRegion({ near: '150 2' })).toMatchObject({
    cone: null,
    problems: { within: expect.stringMatching(/how far/) },
  })
  expect(readRegion({ within: '5' })).toMatchObject({
    cone: null,
    problems: { near: expect.stringMatching(/which position/) },
  })
  expect(readRegion({ near: '150 95', within: '5' })).toMatchObject({
    cone: null,
    problems: { near: expect.stringMatching(/not between/) },
  })
  expect(readRegion({ near: '150 2', within: '200 deg' })).toMatchObject({
    cone: null,
    problems: { within: expect.stringMatching(/at most/) },
  })
  expect(readRegion({ near: '10 89.9', within: '1 deg' }).cone).toMatchObject({ halfWidthDeg: 180, radiusArcsec: 3600 })
  expect(readRegion({})).toEqual({ cone: null, problems: {} })
})
