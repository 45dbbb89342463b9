import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { coneHalfWidthDeg, positionAngleDeg, separationArcsec } from '@/lib/science/sky/separation'

// fixtures/sky/matching.json: mpmath with 50 digits and astropy 5.2.1 (Vincenty).
interface Row {
  case: string
  ra1_deg: number
  dec1_deg: number
  ra2_deg: number
  dec2_deg: number
  high_precision_separation_arcsec: number
  position_angle_deg_N_through_E: number
  position_angle_defined: boolean
}
const { rows, box_prefilter } = JSON.parse(readFileSync('fixtures/sky/matching.json', 'utf8')) as {
  rows: Row[]
  box_prefilter: { rows: { dec: number; r_arcsec: number; half_width_deg: number }[] }
}
const ends = (row: Row) =>
  [
    { raDeg: row.ra1_deg, decDeg: row.dec1_deg },
    { raDeg: row.ra2_deg, decDeg: row.dec2_deg },
  ] as const

describe('separationArcsec', () => {
  // 1e-9 arcsec is what the reference gives as the precision of the formula in doubles.
  it.each(rows)('is right to 1e-9 arcsec: $case', (row) => {
    const [a, b] = ends(row)
    expect(Math.abs(separationArcsec(a, b) - row.high_precision_separation_arcsec)).toBeLessThan(1e-9)
    expect(Math.abs(separationArcsec(b, a) - row.high_precision_separation_arcsec)).toBeLessThan(1e-9)
  })

  it('is NaN for an input that is NaN', () => {
    expect(separationArcsec({ raDeg: NaN, decDeg: 0 }, { raDeg: 0, decDeg: 0 })).toBeNaN()
  })
})

describe('positionAngleDeg', () => {
  it.each(rows.filter((row) => row.position_angle_defined))('runs from north through east: $case', (row) => {
    const [a, b] = ends(row)
    const difference = Math.abs(positionAngleDeg(a, b) - row.position_angle_deg_N_through_E)
    expect(Math.min(difference, 360 - difference)).toBeLessThan(1e-6)
  })

  it('is between 0 and 360', () => {
    expect(positionAngleDeg({ raDeg: 10, decDeg: 0 }, { raDeg: 9, decDeg: 0 })).toBeCloseTo(270, 9)
  })
})

describe('coneHalfWidthDeg', () => {
  it.each(box_prefilter.rows)('at declination $dec, radius $r_arcsec', ({ dec, r_arcsec, half_width_deg }) => {
    expect(coneHalfWidthDeg(dec, r_arcsec)).toBeCloseTo(half_width_deg, 12)
  })
})
