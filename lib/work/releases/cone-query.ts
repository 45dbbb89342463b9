/**
 * What a cone search asks for. Source: IVOA Recommendation Simple Cone Search 1.03 (2008-02-22), section 2, items 1 and 3; MAXREC and
 * RESPONSEFORMAT from DALI 1.1 (2017-05-17), sections 3.4.3 and 3.4.4, which also says that names are read whatever their case (3.1).
 * Parameters that are not known are passed over, as section 2 demands.
 */
export interface ConeQuery {
  raDeg: number
  decDeg: number
  /** 0 asks for the columns alone. */
  radiusDeg: number
  verbosity: 1 | 2 | 3
  /** 0 asks for the columns alone. */
  mostRecords: number
  format: ConeFormat
}

export type ConeFormat = 'tabledata' | 'binary2'

/** Entries in one answer where MAXREC is not given, and at the most. */
export const USUAL_RECORDS = 10_000
export const MOST_RECORDS = 100_000

/** Goes to the client as an error document, word for word. */
export class ConeError extends Error {
  readonly name = 'ConeError'
}

/** Decimal, with or without an exponent; Number() alone would take '', '0x10' and 'Infinity' for numbers. */
const NUMBER = /^[+-]?(\d+\.?\d*|\.\d+)([eE][+-]?\d+)?$/

/** Without parameters of the media type: they are looked at apart. */
const VOTABLE_NAMES = new Set(['votable', 'application/x-votable+xml', 'text/xml'])

/** @throws ConeError with a sentence that names the parameter, what was sent and what would do. */
export function readConeQuery(parameters: Iterable<[name: string, value: string]>): ConeQuery {
  const given = byName(parameters)
  const missing = ['RA', 'DEC', 'SR'].filter((name) => !given.has(name))
  if (missing.length > 0) {
    throw new ConeError(
      `${missing.join(' and ')} ${missing.length === 1 ? 'is' : 'are'} missing. A cone search needs RA, DEC and SR, each in decimal degrees ` +
        `(ICRS), for example RA=150.1&DEC=2.2&SR=0.1.`,
    )
  }
  return {
    raDeg: number(given, 'RA', 0, 360) % 360,
    decDeg: number(given, 'DEC', -90, 90),
    radiusDeg: number(given, 'SR', 0, 180),
    verbosity: verbosity(given.get('VERB')),
    mostRecords: mostRecords(given.get('MAXREC')),
    format: format(given.get('RESPONSEFORMAT')),
  }
}

const KNOWN = new Set(['RA', 'DEC', 'SR', 'VERB', 'MAXREC', 'RESPONSEFORMAT'])

function byName(parameters: Iterable<[string, string]>): Map<string, string> {
  const given = new Map<string, string>()
  for (const [anyCase, value] of parameters) {
    const name = anyCase.toUpperCase()
    if (!KNOWN.has(name)) continue
    if (given.has(name)) throw new ConeError(`${name} is given more than once. Give it once.`)
    given.set(name, value.trim())
  }
  return given
}

function number(given: Map<string, string>, name: 'RA' | 'DEC' | 'SR', least: number, most: number): number {
  const text = given.get(name) ?? ''
  if (!NUMBER.test(text)) {
    const hint = /\d\s*[:hd°]\s*\d|\d\s+\d/i.test(text) ? ' Sexagesimal values are not read here.' : ''
    throw new ConeError(`${name}=${shown(text)} is not a number. Give decimal degrees.${hint}`)
  }
  const value = Number(text)
  if (value >= least && value <= most) return value
  throw new ConeError(`${name}=${shown(text)} is out of range: it lies between ${least} and ${most} degrees.`)
}

function verbosity(text: string | undefined): 1 | 2 | 3 {
  if (text === undefined || text === '2') return 2
  if (text === '1') return 1
  if (text === '3') return 3
  throw new ConeError(`VERB=${shown(text)} is not known. It is 1 (fewest columns), 2 (the usual ones) or 3 (all).`)
}

function mostRecords(text: string | undefined): number {
  if (text === undefined) return USUAL_RECORDS
  if (!/^\d+$/.test(text)) {
    throw new ConeError(
      `MAXREC=${shown(text)} is not a number of entries. Give a whole number; 0 asks for the columns.`,
    )
  }
  return Math.min(Number(text), MOST_RECORDS)
}

function format(text: string | undefined): ConeFormat {
  if (text === undefined || text === '') return 'tabledata'
  const [name, ...parameters] = text
    .toLowerCase()
    .split(';')
    .map((part) => part.trim())
  if (name === 'votable/b2') return 'binary2'
  if (name === 'votable/td') return 'tabledata'
  if (VOTABLE_NAMES.has(name)) {
    const serialization = parameters.find((one) => one.startsWith('serialization='))?.slice('serialization='.length)
    if (serialization === undefined || serialization === 'tabledata') return 'tabledata'
    if (serialization === 'binary2') return 'binary2'
  }
  throw new ConeError(
    `RESPONSEFORMAT=${shown(text)} is not offered. Answers are VOTables: votable, application/x-votable+xml, or ` +
      'application/x-votable+xml;serialization=binary2. The whole release can be downloaded as CSV and JSON.',
  )
}

const shown = (text: string): string => (text.length > 60 ? `${text.slice(0, 60)}…` : text)
