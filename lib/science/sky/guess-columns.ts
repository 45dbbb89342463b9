/**
 * Which columns of a list hold right ascension and declination: by UCD first (IVOA UCD1+, and UCD1 as older files have it), then by
 * name. And how their values are written, by unit, so that a person can confirm it.
 */

export interface ColumnSaying {
  name: string
  unit?: string | null
  ucd?: string | null
  /** what the file says of the frame, such as 'ICRS' or 'eq_FK5' */
  frame?: string | null
}

/** How the values of a coordinate are written. Text is read by `parseRightAscension` and `parseDeclination`. */
export type AngleUnit = 'deg' | 'hour' | 'rad' | 'text'

export interface ColumnGuess {
  /** place among the columns */
  column: number
  unit: AngleUnit
  /** what speaks for it, for a person to judge */
  reason: string
}

export interface PositionColumns {
  ra: ColumnGuess | null
  dec: ColumnGuess | null
  warnings: string[]
}

type Axis = 'ra' | 'dec'

const WORDS: Readonly<Record<Axis, string>> = { ra: 'right ascension', dec: 'declination' }

/** Most telling first; compared without case, blanks, underscores and hyphens. */
const NAMES: Readonly<Record<Axis, readonly RegExp[]>> = {
  ra: [
    /^ra(deg|d)?$/,
    /^(ra(icrs|j2000|2000|mean|cen|gal|lens)|rightascension|alpha(j2000)?|raj2000deg)(deg|d)?$/,
    /^(lens|gal|target|obj|source|src|mean|max|cat)?ra(deg|j2000|icrs|hms|s)?$/,
  ],
  dec: [
    /^dec?(deg|d)?$/,
    /^(dec?(icrs|j2000|2000|mean|cen|gal|lens)|decl|declination|delta(j2000)?|dej2000deg)(deg|d)?$/,
    /^(lens|gal|target|obj|source|src|mean|max|cat)?dec?(deg|j2000|icrs|dms|s)?$/,
  ],
}

const UCDS: Readonly<Record<Axis, RegExp>> = { ra: /^(pos\.eq\.ra|pos_eq_ra)/i, dec: /^(pos\.eq\.dec|pos_eq_dec)/i }
const MAIN = /(;|_)meta\.main|_main$/i

/** A name or UCD that speaks of something about a coordinate: its error, a difference, a motion. */
const ABOUT = /err|sigma|unc|^e_|^pm|stat\.|std|rms|offset|diff|delta_?ra|covar|corr/i

/**
 * The best guess for each of the two, with what a person should look at. Nothing is decided by values here; see `checkPositions`.
 * @returns null for an axis that no column is named like.
 */
export function guessPositionColumns(columns: readonly ColumnSaying[]): PositionColumns {
  const warnings: string[] = []
  const ra = guessAxis('ra', columns, warnings)
  const dec = guessAxis('dec', columns, warnings)
  for (const [axis, guess] of [
    ['ra', ra],
    ['dec', dec],
  ] as const) {
    if (guess === null) warnings.push(`No column looks like a ${WORDS[axis]}; choose it.`)
  }
  return { ra, dec, warnings: [...new Set(warnings)] }
}

function guessAxis(axis: Axis, columns: readonly ColumnSaying[], warnings: string[]): ColumnGuess | null {
  const ranked = columns
    .map((column, place) => ({ place, ...rank(axis, column) }))
    .filter(({ score }) => score > 0)
    .sort((a, b) => b.score - a.score || a.place - b.place)
  const best = ranked[0]
  if (best === undefined) return null
  const equals = ranked.filter(({ score }) => score === best.score)
  if (equals.length > 1) {
    const names = equals.map(({ place }) => columns[place].name).join(', ')
    warnings.push(`Several columns could be the ${WORDS[axis]} (${names}); the first is taken.`)
  }
  const column = columns[best.place]
  return { column: best.place, unit: angleUnit(column, axis), reason: best.reason }
}

function rank(axis: Axis, { name, ucd }: ColumnSaying): { score: number; reason: string } {
  const says = ucd?.trim() ?? ''
  if (UCDS[axis].test(says) && !ABOUT.test(says)) {
    const isMain = MAIN.test(says)
    return { score: isMain ? 20 : 15, reason: `its UCD is ${says}` }
  }
  // A UCD that says something else is believed before the name.
  if (says !== '' && !/^pos/i.test(says)) return { score: 0, reason: '' }
  if (ABOUT.test(name)) return { score: 0, reason: '' }
  const plain = name.toLowerCase().replace(/[\s_\-.()[\]]/g, '')
  const place = NAMES[axis].findIndex((pattern) => pattern.test(plain))
  return place < 0 ? { score: 0, reason: '' } : { score: 10 - place, reason: `its name is ${name}` }
}

/** By unit (VOUnits, and what people write), else by a name that says hours or sexagesimal, else degrees. */
function angleUnit({ name, unit }: ColumnSaying, axis: Axis): AngleUnit {
  const said = (unit ?? '').trim().toLowerCase().replace(/["']/g, '')
  if (/^(h:m:s|hms|hh:mm:ss|d:m:s|dms|dd:mm:ss|sexagesimal)/.test(said)) return 'text'
  if (/^(h|hr|hour|hours|hourangle|h_angle)$/.test(said)) return axis === 'ra' ? 'hour' : 'deg'
  if (/^rad/.test(said)) return 'rad'
  if (said !== '') return 'deg'
  if (/hms|dms|sexa/i.test(name)) return 'text'
  return /hour|_h$|hrs?$/i.test(name) && axis === 'ra' ? 'hour' : 'deg'
}
