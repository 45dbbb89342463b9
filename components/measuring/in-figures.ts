/** Numbers as a person reads them: an error with two digits, and the value with as many. */

/** Decimals that show an error with two significant digits, at most 4. */
function decimalsOf(error: number): number {
  if (!(error > 0)) return 3
  return Math.max(0, Math.min(4, 1 - Math.floor(Math.log10(error))))
}

/** `1.50 ± 0.04″`, or `1.500″` without an error. */
export function withError(value: number, error: number | null, unit = ''): string {
  if (error === null || !Number.isFinite(error)) return `${signed(value.toFixed(3))}${unit}`
  const decimals = decimalsOf(error)
  return `${signed(value.toFixed(decimals))} ± ${error.toFixed(decimals)}${unit}`
}

/** With a true minus, and none before a zero. */
export const signed = (text: string): string => (/^-0\.?0*$/.test(text) ? text.slice(1) : text.replace('-', '−'))

/** For a field that is typed in: a plain minus, and none before a zero. */
export function inField(value: number, decimals: number): string {
  const text = value.toFixed(decimals)
  return Number(text) === 0 ? text.replace('-', '') : text
}

export const arcsec = (value: number, decimals = 2): string => `${signed(value.toFixed(decimals))}″`

/** `1.2 × 10¹¹`, with as many digits of the value. */
export function powerOfTen(value: number, exponent = Math.floor(Math.log10(value))): string {
  return `${(value / 10 ** exponent).toFixed(2)} × 10${superscript(exponent)}`
}

/** Three significant digits and no power of ten: `246`, `0.0123`. */
export const threeDigits = (value: number): string =>
  signed(String(Number(value.toPrecision(3)).toLocaleString('en', { maximumSignificantDigits: 3, useGrouping: false })))

/** Signed; without a bound on the critical curve. */
export function magnificationInWords(magnification: number | null): string {
  if (magnification === null) return 'no bound'
  if (Math.abs(magnification) >= 1000) return magnification > 0 ? '> 1000' : '< −1000'
  return signed(magnification.toFixed(1))
}

const SUPERSCRIPTS = '⁰¹²³⁴⁵⁶⁷⁸⁹'

const superscript = (exponent: number): string =>
  String(exponent).replace(/[-\d]/g, (digit) => (digit === '-' ? '⁻' : SUPERSCRIPTS[Number(digit)]))

/** Days, weeks or years: what a follow-up is planned by. */
export function delayInWords(days: number): string {
  if (days === 0) return 'first'
  if (days < 1 / 240) return '< 0.1 hours'
  if (days < 1) return `${(days * 24).toFixed(1)} hours`
  if (days < 1000) return `${threeDigits(days)} days`
  return `${threeDigits(days / 365.25)} years`
}
