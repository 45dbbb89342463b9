import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { designation } from '@/lib/science/sky/designation'

// fixtures/sky/names.json: the IAU rule in exact decimal arithmetic, and the CDS examples.
interface Name {
  ra_deg: string
  dec_deg: string
  name_ss2_s1: string
  name_s1_s0: string
  name_s0_s0: string
  snapped_integer_method_gives: string
  double_safe: boolean
}
const { rows } = JSON.parse(readFileSync('fixtures/sky/names.json', 'utf8')) as { rows: Name[] }
const safe = rows.filter(({ double_safe }) => double_safe)

describe('designation', () => {
  it.each(safe)('names $ra_deg $dec_deg $name_ss2_s1', (row) => {
    const [ra, dec] = [Number(row.ra_deg), Number(row.dec_deg)]
    expect(designation('SWS', ra, dec)).toBe(`SWS ${row.name_ss2_s1}`)
    expect(designation('SWS', ra, dec, { raDecimals: 1, decDecimals: 0 })).toBe(`SWS ${row.name_s1_s0}`)
    expect(designation('SWS', ra, dec, { raDecimals: 0, decDecimals: 0 })).toBe(`SWS ${row.name_s0_s0}`)
  })

  it.each(rows.filter(({ double_safe }) => !double_safe))(
    'snaps $ra_deg, closer to a step than 1e-10 degree, to it',
    (row) => {
      expect(designation('SWS', Number(row.ra_deg), Number(row.dec_deg))).toBe(
        `SWS ${row.snapped_integer_method_gives}`,
      )
    },
  )

  it('writes + for a declination of minus zero', () => {
    expect(designation('SWS', 0, -0)).toBe('SWS J000000.00+000000.0')
  })

  it.each([
    ['a declination beyond the pole', () => designation('SWS', 0, 90.0001), 'declination 90.0001'],
    ['a declination that is no number', () => designation('SWS', 0, NaN), 'declination NaN'],
    ['an endless right ascension', () => designation('SWS', Infinity, 0), 'right ascension Infinity'],
    ['a short acronym', () => designation('SW', 0, 0), 'acronym "SW"'],
    ['an acronym with a blank', () => designation('S W S', 0, 0), 'acronym "S W S"'],
    ['half a decimal', () => designation('SWS', 0, 0, { raDecimals: 1.5 }), '0 to 4 decimals'],
  ])('refuses %s', (_, call, words) => {
    expect(call).toThrow(RangeError)
    expect(call).toThrow(words)
  })
})
