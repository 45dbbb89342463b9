// Designations by the IAU rule: ACRONYM JHHMMSS.ss+DDMMSS.s, coordinates TRUNCATED and never rounded, the declination truncated
// by its absolute value. Sources: IAU Commission B2 working group on designations, "Specifications concerning designations for
// astronomical radiation sources outside the solar system" (2018), 3.2; the CDS registration form, items 2a and 2c.
//
// A name is no key: two places closer than 0.01 s and 0.1 arcsec can have the same one.

export interface DesignationPrecision {
  /** Decimals of the seconds of right ascension, 0 to 4. */
  raDecimals?: number
  /** Decimals of the arcseconds of declination, 0 to 4. */
  decDecimals?: number
}

/** A double stands for a decimal number with some error: both angles are taken in whole units of 1e-10 degree (0.36 microarcsec). */
const UNITS_PER_DEGREE = 10_000_000_000n
const SECONDS_PER_DEGREE = 240n
const ARCSEC_PER_DEGREE = 3600n
/** "At least three characters": the specifications, 3.1. No blanks, because a blank ends the acronym. */
const ACRONYM = /^[\x21-\x7e]{3,}$/

/**
 * @param acronym of the survey, three or more printable ASCII characters without blanks.
 * @param raDeg right ascension, ICRS, degrees; taken modulo 360. @param decDeg declination, ICRS, degrees, -90 to 90.
 * @throws RangeError with a sentence when the acronym or a coordinate is out of range.
 */
export function designation(
  acronym: string,
  raDeg: number,
  decDeg: number,
  precision: DesignationPrecision = {},
): string {
  const { raDecimals = 2, decDecimals = 1 } = precision
  if (!ACRONYM.test(acronym)) {
    throw new RangeError(
      `The acronym "${acronym}" cannot begin a designation: it takes three or more characters without blanks.`,
    )
  }
  if (!Number.isFinite(raDeg)) throw new RangeError(`The right ascension ${raDeg} is not a number of degrees.`)
  if (!(Math.abs(decDeg) <= 90)) throw new RangeError(`The declination ${decDeg} is not between -90 and 90 degrees.`)
  const raUnits = BigInt(Math.round((raDeg % 360) * 1e10))
  const ra = ((raUnits % (360n * UNITS_PER_DEGREE)) + 360n * UNITS_PER_DEGREE) % (360n * UNITS_PER_DEGREE)
  const dec = BigInt(Math.round(Math.abs(decDeg) * 1e10))
  const sign = decDeg < 0 ? '-' : '+'
  const rightAscension = sexagesimal((ra * SECONDS_PER_DEGREE * scale(raDecimals)) / UNITS_PER_DEGREE, raDecimals)
  const declination = sexagesimal((dec * ARCSEC_PER_DEGREE * scale(decDecimals)) / UNITS_PER_DEGREE, decDecimals)
  return `${acronym} J${rightAscension}${sign}${declination}`
}

function scale(decimals: number): bigint {
  if (Number.isInteger(decimals) && decimals >= 0 && decimals <= 4) return 10n ** BigInt(decimals)
  throw new RangeError(`A designation takes 0 to 4 decimals, not ${decimals}.`)
}

/** Whole units of 10^-decimals seconds as HHMMSS.ss (or DDMMSS.s). */
function sexagesimal(units: bigint, decimals: number): string {
  const perSecond = 10n ** BigInt(decimals)
  const whole = units / perSecond
  const pair = (value: bigint) => value.toString().padStart(2, '0')
  const fraction = decimals === 0 ? '' : `.${(units % perSecond).toString().padStart(decimals, '0')}`
  return pair(whole / 3600n) + pair((whole / 60n) % 60n) + pair(whole % 60n) + fraction
}
