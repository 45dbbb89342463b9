// Right ascension and declination as people read and write them. For names use designation(), which truncates; these round.

/** Text that is no coordinate. The message is one sentence a person can act on. */
export class CoordinateError extends Error {
  readonly name = 'CoordinateError'
}

/**
 * `00ʰ12ᵐ34.56ˢ`, rounded to `decimals` of a second with carry (59.999 becomes the next minute, 24 hours become 0).
 * @param raDeg degrees, taken modulo 360; NaN and infinities give '–'.
 */
export function formatRightAscension(raDeg: number, decimals = 2): string {
  if (!Number.isFinite(raDeg)) return '–'
  const perDay = 86400 * 10 ** decimals
  const units = Math.round((((raDeg % 360) + 360) % 360) * 240 * 10 ** decimals) % perDay
  const [hours, minutes, seconds] = split(units, decimals)
  return `${hours}ʰ${minutes}ᵐ${seconds}ˢ`
}

/**
 * `−01°23′45.6″`, rounded to `decimals` of an arcsecond with carry; the sign is always written, U+2212 for minus.
 * @param decDeg degrees; NaN and infinities give '–'.
 */
export function formatDeclination(decDeg: number, decimals = 1): string {
  if (!Number.isFinite(decDeg)) return '–'
  const [degrees, minutes, seconds] = split(Math.round(Math.abs(decDeg) * 3600 * 10 ** decimals), decimals)
  return `${decDeg < 0 ? '−' : '+'}${degrees}°${minutes}′${seconds}″`
}

function split(units: number, decimals: number): [string, string, string] {
  const perSecond = 10 ** decimals
  const whole = Math.floor(units / perSecond)
  const fraction = decimals === 0 ? '' : `.${String(units % perSecond).padStart(decimals, '0')}`
  const pair = (value: number) => String(value).padStart(2, '0')
  return [pair(Math.floor(whole / 3600)), pair(Math.floor(whole / 60) % 60), pair(whole % 60) + fraction]
}

/**
 * Right ascension in degrees, 0 <= ra < 360.
 *
 * One number is DEGREES ('187.7', '187.7d'), unless it carries an h ('12.5h'). Two or three numbers are HOURS, minutes and
 * seconds ('12:30:49.4', '12 30 49.4', '12h30m49.4s', '12ʰ30ᵐ49.4ˢ'). Right ascension given as a plain number of hours cannot
 * be told from degrees and is taken as degrees.
 * @throws CoordinateError
 */
export function parseRightAscension(text: string): number {
  const { sign, parts, unit } = readParts(text, 'right ascension', RA_MARKS)
  const inHours = parts.length > 1 || unit === 'h'
  const limit = inHours ? 24 : 360
  const value = sign * sexagesimalValue(parts, text, 'right ascension')
  if (value < 0 || value > limit) {
    throw new CoordinateError(
      `The right ascension "${text}" is not between 0 and ${limit} ${inHours ? 'hours' : 'degrees'}.`,
    )
  }
  return (inHours ? value * 15 : value) % 360
}

/**
 * Declination in degrees, -90 to 90: one number is degrees, two or three are degrees, minutes and seconds ('-01:23:45.6',
 * '−01 23 45.6', '-01d23m45.6s', '−01°23′45.6″').
 * @throws CoordinateError
 */
export function parseDeclination(text: string): number {
  const { sign, parts } = readParts(text, 'declination', DEC_MARKS)
  const value = sign * sexagesimalValue(parts, text, 'declination')
  if (Math.abs(value) <= 90) return value
  throw new CoordinateError(`The declination "${text}" is not between -90 and 90 degrees.`)
}

const NUMBER = String.raw`(\d+(?:\.\d*)?|\.\d+)`
const EXPONENT_NUMBER = /^([+-]?)((?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?)$/
const RA_MARKS = new RegExp(`^([+-]?)${NUMBER}(?:([hd: ])(?:${NUMBER}(?:[m: ](?:${NUMBER}s?)?)?)?)?$`)
const DEC_MARKS = new RegExp(`^([+-]?)${NUMBER}(?:([d: ])(?:${NUMBER}(?:[m': ](?:${NUMBER}(?:s|"|'')?)?)?)?)?$`)

function readParts(text: string, what: string, marks: RegExp): { sign: number; parts: string[]; unit: string } {
  const plain = text
    .trim()
    .toLowerCase()
    .replace(/[−–]/g, '-')
    .replace(/ʰ/g, 'h')
    .replace(/[°º]/g, 'd')
    .replace(/ᵐ/g, 'm')
    .replace(/ˢ/g, 's')
    .replace(/[′’]/g, "'")
    .replace(/[″”]/g, '"')
    .replace(/\s*([hdms:'"])\s*/g, '$1')
    .replace(/^([+-])\s+/, '$1')
    .replace(/\s+/g, ' ')
  const number = EXPONENT_NUMBER.exec(plain)
  if (number !== null) return { sign: number[1] === '-' ? -1 : 1, parts: [number[2]], unit: '' }
  const match = marks.exec(plain)
  if (match === null) {
    const example = what === 'declination' ? '-1.396 or -01:23:45.6' : '3.144 (degrees) or 00:12:34.56 (hours)'
    throw new CoordinateError(`The ${what} "${text}" cannot be read; write it like ${example}.`)
  }
  const parts = [match[2], match[4], match[5]].filter((part) => part !== undefined)
  // 'd' after the first of several numbers of a right ascension would be degrees, minutes and seconds, which nobody writes.
  if (what !== 'declination' && parts.length > 1 && match[3] === 'd') {
    throw new CoordinateError(
      `The right ascension "${text}" has degrees with minutes; write hours (h) or decimal degrees.`,
    )
  }
  return { sign: match[1] === '-' ? -1 : 1, parts, unit: match[3] ?? '' }
}

function sexagesimalValue(parts: string[], text: string, what: string): number {
  const [first, minutes = 0, seconds = 0] = parts.map(Number)
  if (minutes >= 60 || seconds >= 60) {
    throw new CoordinateError(`The ${what} "${text}" has minutes or seconds of 60 or more.`)
  }
  if (parts.slice(0, -1).some((part) => part.includes('.'))) {
    throw new CoordinateError(`The ${what} "${text}" has a decimal point before its last number.`)
  }
  return first + minutes / 60 + seconds / 3600
}
