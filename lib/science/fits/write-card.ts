// One header card, in fixed format where the value fits (FITS Standard 4.0, 4.2).
import type { FitsValue } from '@/lib/science/fits/fits-types'

/** A keyword with its value, or with keyword COMMENT or HISTORY a line of text. */
export interface FitsCard {
  keyword: string
  value: FitsValue
  comment?: string
}

const KEYWORD = /^[A-Z0-9_-]{1,8}$/
const PRINTABLE = /^[\x20-\x7e]*$/

/**
 * 80 characters. A comment is cut where the card ends.
 * @throws RangeError when keyword or value cannot stand in a FITS card: other characters, too long, not finite.
 */
export function writeCard({ keyword, value, comment = '' }: FitsCard): string {
  if (!KEYWORD.test(keyword))
    throw new RangeError(`"${keyword}" is no FITS keyword: it takes 1 to 8 of A-Z, 0-9, - and _.`)
  if (!PRINTABLE.test(comment) || (typeof value === 'string' && !PRINTABLE.test(value))) {
    throw new RangeError(`The card ${keyword} holds characters outside printable ASCII, which FITS does not allow.`)
  }
  if (keyword === 'COMMENT' || keyword === 'HISTORY') {
    if (String(value).length > 72)
      throw new RangeError(`A ${keyword} line takes 72 characters, not ${String(value).length}.`)
    return `${keyword.padEnd(8)}${value}`.padEnd(80)
  }
  const written = `${keyword.padEnd(8)}= ${fieldOf(keyword, value)}`
  return (comment === '' ? written : `${written} / ${comment}`).slice(0, 80).padEnd(80)
}

function fieldOf(keyword: string, value: FitsValue): string {
  if (typeof value === 'boolean') return (value ? 'T' : 'F').padStart(20)
  if (typeof value === 'string') {
    const quoted = `'${value.replaceAll("'", "''").padEnd(8)}'`
    if (quoted.length > 70)
      throw new RangeError(`The text of ${keyword} has ${value.length} characters; a card holds 68.`)
    return quoted.padEnd(20)
  }
  if (!Number.isFinite(value))
    throw new RangeError(`${keyword} = ${value} cannot be written: FITS headers hold finite numbers only.`)
  return numberText(value).padStart(20)
}

/** The shortest decimal that reads back as the same double; an exponent is written with a decimal point and a capital E. */
function numberText(value: number): string {
  const text = String(Object.is(value, -0) ? 0 : value).toUpperCase()
  const [mantissa, exponent] = text.split('E')
  if (exponent === undefined) return text
  return `${mantissa.includes('.') ? mantissa : `${mantissa}.0`}E${exponent.replace('+', '')}`
}
