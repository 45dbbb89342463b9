import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { readVotable } from '@/lib/science/formats/read-votable'
import { checkPositions } from './check-positions'
import { guessPositionColumns } from './guess-columns'

const names = (...columns: string[]) => columns.map((name) => ({ name }))
const found = (columns: Parameters<typeof guessPositionColumns>[0]) => {
  const { ra, dec } = guessPositionColumns(columns)
  return [ra && columns[ra.column].name, dec && columns[dec.column].name]
}

describe('the columns of a position', () => {
  // IVOA UCD1+ controlled vocabulary: pos.eq.ra, pos.eq.dec, meta.main for the main one; UCD1: POS_EQ_RA_MAIN.
  it('are found by their UCD, the main one first, whatever their names', () => {
    expect(
      found([
        { name: 'a', ucd: 'pos.eq.ra' },
        { name: 'b', ucd: 'pos.eq.ra;meta.main' },
        { name: 'ra', ucd: 'meta.code' },
        { name: 'c', ucd: 'stat.error;pos.eq.dec' },
        { name: 'd', ucd: 'pos.eq.dec;meta.main' },
      ]),
    ).toEqual(['b', 'd'])
    expect(
      found([
        { name: 'x', ucd: 'POS_EQ_RA_MAIN' },
        { name: 'y', ucd: 'POS_EQ_DEC_MAIN' },
      ]),
    ).toEqual(['x', 'y'])
  })

  // Names as catalogues have them; common practice, no source.
  it.each([
    ['RA', 'DEC'],
    ['ra_deg', 'dec_deg'],
    ['RAJ2000', 'DEJ2000'],
    ['_RAJ2000', '_DEJ2000'],
    ['RA_ICRS', 'DE_ICRS'],
    ['RAdeg', 'DEdeg'],
    ['ALPHA_J2000', 'DELTA_J2000'],
    ['Right Ascension', 'Declination'],
    ['lens_ra', 'lens_dec'],
    ['raMean', 'decMean'],
    ['RA (deg)', 'Dec (deg)'],
  ])('are found by their names: %s and %s', (ra, dec) => {
    expect(
      found(names('id', 'grade', ra, `e_${ra}`, 'ra_err', dec, 'dec_error', 'pmRA', 'pmDE', 'radius', 'deblend')),
    ).toEqual([ra, dec])
  })

  it('are found in a real VOTable, with unit and reason', () => {
    const bytes = new Uint8Array(readFileSync('fixtures/votable/reading/catalogue.vot'))
    const { ra, dec, warnings } = guessPositionColumns(readVotable(bytes).fields)
    expect(ra).toEqual({ column: 2, unit: 'deg', reason: 'its UCD is pos.eq.ra;meta.main' })
    expect(dec?.column).toBe(3)
    expect(warnings).toEqual([])
  })

  it('say in which unit they are', () => {
    const unit = (column: { name: string; unit?: string }) => guessPositionColumns([column, { name: 'dec' }]).ra?.unit
    expect(unit({ name: 'ra', unit: 'deg' })).toBe('deg')
    expect(unit({ name: 'ra', unit: 'h' })).toBe('hour')
    expect(unit({ name: 'ra', unit: '"h:m:s"' })).toBe('text')
    expect(unit({ name: 'ra', unit: 'rad' })).toBe('rad')
    expect(unit({ name: 'ra_hms' })).toBe('text')
    expect(unit({ name: 'ra' })).toBe('deg')
  })

  it('are warned about where they are missing or doubtful', () => {
    expect(guessPositionColumns(names('x', 'y'))).toEqual({
      ra: null,
      dec: null,
      warnings: [
        'No column looks like a right ascension; choose it.',
        'No column looks like a declination; choose it.',
      ],
    })
    expect(guessPositionColumns(names('RA', 'ra', 'dec')).warnings).toEqual([
      'Several columns could be the right ascension (RA, ra); the first is taken.',
    ])
  })
})

const degrees = { ra: 'deg', dec: 'deg' } as const
const kinds = (checked: ReturnType<typeof checkPositions>) => checked.problems.map(({ kind }) => kind)

describe('the positions of a list', () => {
  it('are degrees, with right ascension from 0 to 360', () => {
    const { positions, usable, problems } = checkPositions([150.1, -10, 360], [2.2, -89, 90], degrees)
    expect([...positions.raDeg]).toEqual([150.1, 350, 0])
    expect([...positions.decDeg]).toEqual([2.2, -89, 90])
    expect([usable, problems]).toEqual([3, []])
  })

  it('are read from hours, radians and text', () => {
    expect(checkPositions([10], [5], { ra: 'hour', dec: 'deg' }).positions.raDeg[0]).toBe(150)
    expect(checkPositions([Math.PI], [-Math.PI / 4], { ra: 'rad', dec: 'rad' }).positions.decDeg[0]).toBeCloseTo(
      -45,
      12,
    )
    const { positions, problems } = checkPositions(['12:30:49.4', '187.7'], ['-01:23:45.6', '+12.5'], {
      ra: 'text',
      dec: 'text',
    })
    expect(positions.raDeg[0]).toBeCloseTo(15 * (12 + 30 / 60 + 49.4 / 3600), 10)
    expect(positions.decDeg[0]).toBeCloseTo(-(1 + 23 / 60 + 45.6 / 3600), 10)
    expect(positions.raDeg[1]).toBe(187.7)
    expect(problems).toEqual([])
  })

  it('in sexagesimal are read even where degrees were expected', () => {
    expect(checkPositions(['10:00:24'], ['+02:12:00'], degrees).positions.raDeg[0]).toBeCloseTo(150.1, 10)
  })

  it('with right ascension in hours are warned about, and kept as they are', () => {
    const ra = Array.from({ length: 20 }, (_, k) => k * 1.2)
    const dec = ra.map((_, k) => 4 * k - 40)
    const checked = checkPositions(ra, dec, degrees)
    expect(kinds(checked)).toEqual(['hours'])
    expect(checked.problems[0].message).toContain('they are probably hours, not degrees')
    expect(checked.usable).toBe(20)
    // A field near RA 0 is no reason to suspect hours.
    expect(
      kinds(
        checkPositions(
          ra,
          dec.map((value) => value / 20),
          degrees,
        ),
      ),
    ).toEqual([])
    expect(kinds(checkPositions(ra, dec, { ra: 'hour', dec: 'deg' }))).toEqual([])
  })

  it('with the columns swapped are warned about', () => {
    const checked = checkPositions([2.2, -5, 40], [150.1, 33, 210], degrees, 2)
    expect(kinds(checked)).toEqual(['swapped'])
    expect(checked.problems[0]).toMatchObject({ rows: [0, 2], count: 2 })
    expect(checked.problems[0].message).toContain('2 rows (the first is row 2) have a declination beyond 90 degrees')
  })

  it('beyond the sky are named and match nothing, the others stay', () => {
    const checked = checkPositions([10, 400, 20, 200], [10, 10, 95, -91], degrees)
    expect(kinds(checked)).toEqual(['out-of-range'])
    expect(checked.problems[0].rows).toEqual([1, 2, 3])
    expect([...checked.positions.raDeg]).toEqual([10, NaN, NaN, NaN])
    expect(checked.usable).toBe(1)
  })

  it('that are missing or cannot be read are counted and named', () => {
    const checked = checkPositions([NaN, 1, null, 'abc', ''], [1, 'NaN', 3, '4', '5'], degrees)
    expect(kinds(checked)).toEqual(['missing', 'unreadable'])
    expect(checked.problems[0].message).toBe(
      '4 rows (the first is row 1) have no right ascension or declination; such rows match nothing.',
    )
    expect(checked.problems[1].message).toContain('Row 4 has a position that cannot be read. The right ascension "abc"')
    expect(checked.usable).toBe(0)
  })

  it('are refused when the columns have two lengths', () => {
    expect(() => checkPositions([1], [1, 2], degrees)).toThrow('1 right ascensions for 2 declinations')
  })
})
