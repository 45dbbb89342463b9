/** One value as the text of a VOTable cell, before XML escaping. Source: VOTable 1.4 section 6 and table 1. */
import type { CellValue, Datatype } from '@/lib/science/formats/columns'

const INTEGER_LIMIT: Partial<Record<Datatype, number>> = {
  short: 2 ** 15,
  int: 2 ** 31,
  // Beyond 2^53 a double no longer holds every integer, so a larger one would not be the number that was meant.
  long: 2 ** 53,
}

interface Typed {
  name: string
  datatype: Datatype
  nullValue?: number
}

/**
 * null is an empty cell, `nullValue` in an integer column that has one, '?' in a boolean one. Floating numbers are the
 * shortest text that reads back as the same double, with NaN, +Inf and -Inf. 'char' takes ASCII only, 'unicodeChar' anything.
 * @param where the place for messages: the number of a row, or words.
 * @throws RangeError when the value does not fit the datatype.
 */
export function cellText(column: Typed, value: CellValue, where: number | string): string {
  const refuse = (why: string): never => {
    const place = typeof where === 'number' ? `row ${where}` : where
    throw new RangeError(`Column ${column.name}, ${place}: ${why}.`)
  }
  const { datatype } = column
  if (value === null) {
    if (datatype === 'boolean') return '?'
    return INTEGER_LIMIT[datatype] !== undefined && column.nullValue !== undefined ? String(column.nullValue) : ''
  }
  if (datatype === 'unicodeChar') return String(value)
  if (datatype === 'char') {
    const text = String(value)
    return /[^\t\n\r\x20-\x7e]/.test(text) ? refuse('char holds ASCII only; declare the column unicodeChar') : text
  }
  if (datatype === 'boolean') return typeof value === 'boolean' ? String(value) : refuse(`'${value}' is not a boolean`)
  if (typeof value !== 'number') return refuse(`'${value}' is not a number`)
  const limit = INTEGER_LIMIT[datatype]
  if (limit !== undefined) {
    if (!Number.isInteger(value)) return refuse(`${value} is not a whole number`)
    if (value < -limit || value >= limit) return refuse(`${value} does not fit ${datatype}`)
    if (value === column.nullValue) return refuse(`${value} stands for a missing value here`)
    return String(value)
  }
  if (Number.isNaN(value)) return 'NaN'
  if (!Number.isFinite(value)) return value > 0 ? '+Inf' : '-Inf'
  if (datatype === 'float' && !Number.isFinite(Math.fround(value))) return refuse(`${value} does not fit float`)
  return Object.is(value, -0) ? '-0' : String(value)
}
