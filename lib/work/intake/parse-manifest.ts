import { readCsv, type CsvTable } from '@/lib/science/formats/csv'
import { parseDeclination, parseRightAscension } from '@/lib/science/sky/coordinates'
import { baseName, UNSEEN } from './file-name'
import { contradictions, explanationOf, truthOf, type Truth } from './told-truth'
import { manifestColumns, type ChosenColumns, type ManifestColumn, type ManifestHeaders } from './manifest-columns'

export interface ManifestEntry {
  line: number
  fileName: string | null
  fileBase: string | null
  candidate: string | null
  band: string | null
  raDeg: number | null
  decDeg: number | null
  pixelScaleArcsec: number | null
  score: number | null
  lensRedshift: number | null
  sourceRedshift: number | null
  /** What its candidate is known to be: a calibration stamp. */
  truth: Truth | null
  /** What practice says of it after the answer. */
  explanation: string | null
}

export interface ParsedManifest {
  entries: ManifestEntry[]
  /** One sentence each; a value named here was left out, the rest of its line was taken. */
  problems: string[]
  /** Set when nothing can be taken from the file. */
  refusal: { fault: string; reason: string } | null
}

const EMPTY = /^(|-|–|—|nan|null|none|n\/?a|--)$/i

/** Words that mean nothing are nothing: an empty cell, `-`, `nan`, `null`. */
function cell(values: Record<string, string>, name: string | undefined): string | null {
  const text = name === undefined ? '' : (values[name] ?? '').trim()
  return EMPTY.test(text) ? null : text
}

/** Never throws on bad content: every value that cannot be used is named with its line. */
export function parseManifest(bytes: Uint8Array, chosen: ChosenColumns = {}): ParsedManifest {
  const table = readCsv(bytes)
  return parseManifestTable(table, manifestColumns(table.header, chosen))
}

export function parseManifestTable(table: CsvTable, columns: ManifestHeaders): ParsedManifest {
  const problems = table.problems.map(({ line, message }) => (line === null ? message : `Line ${line}: ${message}`))
  if (columns.file === undefined && columns.candidate === undefined) {
    const shown = table.header.slice(0, 12).map((name) => (name.length > 40 ? `${name.slice(0, 40).trim()}…` : name))
    const found = shown.length > 0 ? `it has ${shown.join(', ')}` : 'it has none'
    const reason = `A manifest needs a column 'file' or 'candidate' in its first line, and ${found}. It may also have band, ra, dec, pixel_scale, score, lens_redshift, source_redshift, truth and explanation.`
    return { entries: [], problems, refusal: { fault: 'no-columns', reason } }
  }
  const entries = table.rows.flatMap(({ line, values }) => entryOf(line, values, columns, problems) ?? [])
  problems.push(...contradictions(entries))
  return { entries, problems, refusal: null }
}

function entryOf(
  line: number,
  values: Record<string, string>,
  columns: ManifestHeaders,
  problems: string[],
): ManifestEntry | null {
  const fault = (sentence: string) => void problems.push(`Line ${line}: ${sentence}`)
  const fileName = cell(values, columns.file)
  const candidate = cell(values, columns.candidate)
  if (fileName === null && candidate === null) {
    fault('neither a file nor a candidate is named, so that nothing is taken from it.')
    return null
  }
  const why =
    noName('file', fileName, MOST_PATH_CHARACTERS) ?? noName('candidate', candidate, MOST_CANDIDATE_CHARACTERS)
  if (why !== null) {
    fault(`${why}, so that nothing is taken from it.`)
    return null
  }
  const position = positionOf(cell(values, columns.ra), cell(values, columns.dec), fault)
  const number = (column: ManifestColumn, allowed: (value: number) => boolean, rule: string) => {
    const text = cell(values, columns[column])
    if (text === null) return null
    const value = Number(withPoint(text))
    if (Number.isFinite(value) && allowed(value)) return value
    fault(`${columns[column]} is '${text}'; ${rule}.`)
    return null
  }
  const redshift = (column: 'lensRedshift' | 'sourceRedshift') =>
    number(column, (value) => value >= 0 && value < 20, 'a redshift is a number from 0 to 20')
  const [lensRedshift, sourceRedshift] = [redshift('lensRedshift'), redshift('sourceRedshift')]
  if (lensRedshift !== null && sourceRedshift !== null && sourceRedshift <= lensRedshift) {
    fault(
      `${columns.sourceRedshift} ${sourceRedshift} is not above ${columns.lensRedshift} ${lensRedshift}: the source must lie behind the lens. Both are kept as they are; check which is which.`,
    )
  }
  return {
    line,
    fileName: fileName?.replaceAll('\\', '/').replace(/^(\.?\/)+/, '') ?? null,
    fileBase: fileName === null ? null : baseName(fileName.replaceAll('\\', '/')),
    candidate,
    band: cell(values, columns.band),
    ...position,
    pixelScaleArcsec: number(
      'pixelScale',
      (value) => value > 0 && value < 3600,
      'a pixel scale is a number of arcseconds above 0',
    ),
    score: number('score', () => true, 'a score is a number'),
    lensRedshift,
    sourceRedshift,
    truth: truthOf(cell(values, columns.truth), columns.truth, fault),
    explanation: explanationOf(cell(values, columns.explanation), columns.explanation, fault),
  }
}

const MOST_CANDIDATE_CHARACTERS = 200
/** Of the computer on which the manifest was made. */
const MOST_PATH_CHARACTERS = 2000

/** Why a name cannot be one. Cut off or cleaned, two names might become one candidate. */
function noName(what: string, text: string | null, most: number): string | null {
  if (text === null) return null
  if (text.length > most) return `the name of the ${what} has ${text.length.toLocaleString('en')} characters`
  return UNSEEN.test(text) ? `the name of the ${what} holds control characters` : null
}

/** `10,5` is 10.5 where tables part their columns by semicolons; a number with thousands set off has more commas or a point. */
const withPoint = (text: string): string => (/^[+-]?\d+,\d+$/.test(text) ? text.replace(',', '.') : text)

/** Both or none: half a position is no position. */
function positionOf(
  ra: string | null,
  dec: string | null,
  fault: (sentence: string) => void,
): { raDeg: number | null; decDeg: number | null } {
  const none = { raDeg: null, decDeg: null }
  if (ra === null && dec === null) return none
  if (ra === null || dec === null) {
    fault(
      `it has a ${ra === null ? 'declination without a right ascension' : 'right ascension without a declination'}.`,
    )
    return none
  }
  try {
    return { raDeg: parseRightAscension(withPoint(ra)), decDeg: parseDeclination(withPoint(dec)) }
  } catch (error) {
    fault(error instanceof Error ? error.message : String(error))
    return none
  }
}
