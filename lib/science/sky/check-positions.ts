/**
 * Positions of a list from columns as a file has them, to degrees, with what is wrong said once each: right ascension in hours,
 * columns swapped, degrees beyond their range, missing values. No row is dropped: one that has no position is NaN and counted.
 */
import { CoordinateError, parseDeclination, parseRightAscension } from './coordinates'
import type { AngleUnit } from './guess-columns'
import type { Positions } from './position-index'

export interface PositionProblem {
  kind: 'hours' | 'perhaps-hours' | 'swapped' | 'out-of-range' | 'missing' | 'unreadable'
  /** places of the rows that it holds for, at most the first 20 */
  rows: number[]
  /** how many rows in all */
  count: number
  /** a sentence: what is wrong, where, and what to do */
  message: string
}

export interface CheckedPositions {
  /** degrees; NaN in both where a row has no usable position */
  positions: Positions
  usable: number
  problems: PositionProblem[]
}

export type AngleValues = ArrayLike<number | string | null>

const SHOWN = 20
const NAMED = 3

/** How messages name rows: 'Line 7 has', '3 lines (the first is line 7) have'. */
export interface RowNames {
  one: string
  many: string
  numberOf: (place: number) => number
}

/**
 * @param ra, dec as many values each: numbers in the unit given, or text. @param units 'text' reads '12:30:49.4' and '12.5h' too.
 * @param firstRow number of the first row in messages, such as 2 in a file whose first line is a header; or how rows are named.
 * @throws RangeError when there are not as many of one as of the other.
 */
export function checkPositions(
  ra: AngleValues,
  dec: AngleValues,
  units: { ra: AngleUnit; dec: AngleUnit },
  firstRow: number | RowNames = 1,
): CheckedPositions {
  if (ra.length !== dec.length) {
    throw new RangeError(`There are ${ra.length} right ascensions for ${dec.length} declinations.`)
  }
  const count = ra.length
  const positions: Positions = { raDeg: new Float64Array(count), decDeg: new Float64Array(count) }
  const missing = new Rows()
  const unreadable = new Rows()
  const outside = new Rows()
  const declinationsBeyond = new Rows()
  let firstFault = ''
  let [usable, mostRa, leastDec, mostDec, mostRaSize] = [0, 0, Infinity, -Infinity, 0]
  for (let k = 0; k < count; k++) {
    let [a, d] = [Number.NaN, Number.NaN]
    if (isMissing(ra[k]) || isMissing(dec[k])) missing.add(k)
    else {
      try {
        a = toDegrees(ra[k], units.ra, 'ra')
        d = toDegrees(dec[k], units.dec, 'dec')
      } catch (error) {
        if (!(error instanceof CoordinateError)) throw error
        unreadable.add(k)
        firstFault ||= error.message
        ;[a, d] = [Number.NaN, Number.NaN]
      }
      if (Math.abs(d) > 90) declinationsBeyond.add(k)
      if (Math.abs(d) > 90 || a < -180 || a > 360 || Math.abs(a) === Infinity) outside.add(k)
      mostRaSize = Math.max(mostRaSize, Number.isNaN(a) ? 0 : Math.abs(a))
    }
    const isUsable = a >= -180 && a <= 360 && Math.abs(d) <= 90
    positions.raDeg[k] = isUsable ? wholeTurn(a) : Number.NaN
    positions.decDeg[k] = isUsable ? d : Number.NaN
    if (!isUsable) continue
    usable++
    mostRa = Math.max(mostRa, Math.abs(a))
    leastDec = Math.min(leastDec, d)
    mostDec = Math.max(mostDec, d)
  }
  const names: RowNames =
    typeof firstRow === 'number' ? { one: 'row', many: 'rows', numberOf: (place) => place + firstRow } : firstRow
  const where = (rows: Rows) => rows.where(names)
  const problems: PositionProblem[] = []
  const add = (kind: PositionProblem['kind'], rows: Rows, message: string) =>
    problems.push({ kind, rows: rows.first, count: rows.count, message })
  if (missing.count > 0)
    add('missing', missing, `${where(missing)} no right ascension or declination; such rows match nothing.`)
  if (unreadable.count > 0)
    add('unreadable', unreadable, `${where(unreadable)} a position that cannot be read. ${firstFault}`)
  const isSwapped = declinationsBeyond.count > 0 && mostRaSize <= 90
  if (isSwapped) {
    const message = `${where(declinationsBeyond)} a declination beyond 90 degrees while no right ascension is above 90: the two columns are probably swapped.`
    add('swapped', declinationsBeyond, message)
  } else if (outside.count > 0) {
    const message = `${where(outside)} a position off the sky (${outside.named(names, (k) => `${String(ra[k]).trim()}, ${String(dec[k]).trim()}`)}): right ascension must be from 0 to 360 degrees and declination from -90 to 90.`
    add('out-of-range', outside, message)
  }
  // On a sky of ten positions or more all within 24 degrees of RA and spread in declination, hours are the likelier reading.
  // Fewer can be so by chance (24/360 cubed, one in 3,400, for three anywhere): told, for a person to look.
  if (units.ra === 'deg' && usable >= 3 && mostRa <= 24 && mostDec - leastDec > 30) {
    const all = new Rows()
    for (let k = 0; k < count; k++) if (!Number.isNaN(positions.raDeg[k])) all.add(k)
    if (usable < 10) {
      const few = `All ${usable} right ascensions are between 0 and 24: see whether they are degrees or hours.`
      add('perhaps-hours', all, few)
      return { positions, usable, problems }
    }
    const message = `Every right ascension is between 0 and 24 while declinations span ${Math.round(mostDec - leastDec)} degrees: they are probably hours, not degrees.`
    add('hours', all, message)
  }
  return { positions, usable, problems }
}

/** 0 to below 360; what is there already keeps its last bit. */
function wholeTurn(raDeg: number): number {
  if (raDeg >= 0 && raDeg < 360) return raDeg
  return raDeg < 0 ? raDeg + 360 : raDeg - 360
}

function isMissing(value: number | string | null): boolean {
  return (
    value === null ||
    (typeof value === 'number' ? Number.isNaN(value) : value.trim() === '' || /^nan$/i.test(value.trim()))
  )
}

const DEGREES_PER: Readonly<Record<Exclude<AngleUnit, 'text'>, number>> = { deg: 1, hour: 15, rad: 180 / Math.PI }

function toDegrees(value: number | string | null, unit: AngleUnit, axis: 'ra' | 'dec'): number {
  if (value === null) return Number.NaN
  if (unit !== 'text') {
    const number = typeof value === 'number' ? value : Number(value.trim().replace(/^\u2212/, '-'))
    if (!Number.isNaN(number)) return number * DEGREES_PER[unit]
  }
  const text = String(value)
  return axis === 'ra' ? parseRightAscension(text) : parseDeclination(text)
}

class Rows {
  readonly first: number[] = []
  count = 0

  add(row: number): void {
    if (this.first.length < SHOWN) this.first.push(row)
    this.count++
  }

  /** 'row 7: 406.9, 94.5; row 9: …', of the first few. */
  named({ one, numberOf }: RowNames, valuesOf: (row: number) => string): string {
    const told = this.first.slice(0, NAMED).map((row) => `${one} ${numberOf(row)}: ${valuesOf(row)}`)
    return [...told, ...(this.count > NAMED ? ['…'] : [])].join('; ')
  }

  /** 'Row 7 has', '3 rows (the first is row 7) have' */
  where({ one, many, numberOf }: RowNames): string {
    const row = numberOf(this.first[0])
    const begun = one[0].toUpperCase() + one.slice(1)
    return this.count === 1 ? `${begun} ${row} has` : `${this.count} ${many} (the first is ${one} ${row}) have`
  }
}
