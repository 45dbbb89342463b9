/** Reads a list of known objects as a lead has mapped it, and says what is wrong with it. Runs in a worker. */
import type { ListMapping } from '@/db/schema/matching'
import { checkPositions, type PositionProblem, type RowNames } from '@/lib/science/sky/check-positions'
import { anglesDeg, toIcrs, unitVector } from '@/lib/science/sky/frames'
import type { Positions } from '@/lib/science/sky/position-index'
import { openList, type FileFaults, type ListFile, type ListRow } from './list-file'
import { guessMapping, type ListColumn } from './list-mapping'
import { foreignFrame } from './said-frame'

export interface Finding {
  sentence: string
  /** The list is not taken in with it, unless a lead says so. */
  stops: boolean
}

/** A row as it will be kept. */
export interface ReadRow {
  row: number
  name: string
  raDeg: number | null
  decDeg: number | null
  redshift: number | null
  more: Record<string, string>
}

export interface ListLook {
  format: 'csv' | 'votable'
  columns: ListColumn[]
  mapping: ListMapping
  /** The first rows, and behind them the first of those that are at fault: what the file says of their place, and what is read. */
  rows: (ReadRow & { raText: string; decText: string })[]
  /** Rows that were looked at, and whether they are all. */
  looked: number
  isWhole: boolean
  findings: Finding[]
}

export interface ListTask {
  path: string
  mapping: ListMapping
}

/** Parts are JSON of a list of `[row, name, ra, dec, redshift, more]`. */
export type ListRead = { refused: Finding[] } | { rows: number; positions: number; findings: Finding[] }

const LOOK_BYTES = 4 * 1024 * 1024
const SHOWN_ROWS = 12
/** Behind the first rows, of those that findings are about. */
const SHOWN_FAULTY = 12
const ROWS_PER_PART = 1000
const LONGEST_TEXT = 300

/** The beginning of a file as it will be read; without a mapping by the one that its columns look like. */
export async function lookAtList(path: string, bytes: number, chosen: ListMapping | null): Promise<ListLook> {
  const isWhole = bytes <= LOOK_BYTES
  const file = await openList(path, isWhole ? Infinity : LOOK_BYTES)
  const guess = guessMapping(file.columns)
  const mapping = chosen ?? guess.mapping
  const warnings = chosen ? [] : guess.warnings.map((sentence) => ({ sentence, stops: false }))
  const missing = missingColumns(file.columns, mapping)
  const rows: ListRow[] = []
  for await (const batch of file.batches) rows.push(...batch)
  const place = missing.length > 0 ? null : placesOf(file, mapping, rows)
  const atFault = (place?.faulty ?? []).filter((index) => index >= SHOWN_ROWS).slice(0, SHOWN_FAULTY)
  const shown = [...rows.slice(0, SHOWN_ROWS).keys(), ...atFault].map((index) => ({
    ...readRow(file, mapping, rows[index], place?.positions ?? null, index),
    raText: textAt(file, rows[index], mapping.ra),
    decText: textAt(file, rows[index], mapping.dec),
  }))
  return {
    format: file.format,
    columns: file.columns,
    mapping,
    rows: shown,
    looked: rows.length,
    isWhole,
    findings: [...missing, ...warnings, ...(place?.findings ?? []), ...findingsOf(file.faults, rows.length)],
  }
}

/**
 * Checks the whole file first and refuses it where something stops it, then hands its rows on in parts. A CSV is read twice, so that
 * memory holds its positions and never its text.
 */
export async function readList(task: ListTask, emit: (part: string) => Promise<void>): Promise<ListRead> {
  const { path, mapping } = task
  const file = await openList(path)
  const missing = missingColumns(file.columns, mapping)
  if (missing.length > 0) return { refused: missing }
  const numbers: number[] = []
  const ra: (string | number)[] = []
  const dec: (string | number)[] = []
  const [raAt, decAt] = [columnAt(file, mapping.ra), columnAt(file, mapping.dec)]
  for await (const batch of file.batches) {
    for (const { number, values } of batch) {
      numbers.push(number)
      ra.push(lean(values[raAt], mapping.raUnit))
      dec.push(lean(values[decAt], mapping.decUnit))
    }
  }
  const { positions, usable, findings } = checked(file, mapping, { numbers, ra, dec })
  findings.push(...findingsOf(file.faults, numbers.length))
  if (usable === 0 || (!mapping.allTheSame && findings.some(({ stops }) => stops))) return { refused: findings }
  const again = await openList(path)
  let part: unknown[] = []
  let place = 0
  for await (const batch of again.batches) {
    for (const row of batch) {
      const { name, raDeg, decDeg, redshift, more } = readRow(again, mapping, row, positions, place++)
      part.push([row.number, name, raDeg, decDeg, redshift, Object.keys(more).length > 0 ? JSON.stringify(more) : null])
      if (part.length < ROWS_PER_PART) continue
      await emit(JSON.stringify(part))
      part = []
    }
  }
  if (part.length > 0) await emit(JSON.stringify(part))
  return { rows: numbers.length, positions: usable, findings }
}

const columnAt = (file: ListFile, name: string) => file.columns.findIndex((column) => column.name === name)
const textAt = (file: ListFile, row: ListRow, name: string): string => String(row.values[columnAt(file, name)] ?? '')

/** Numbers take less room than their text. */
function lean(value: string | number, unit: ListMapping['raUnit']): string | number {
  if (typeof value === 'number' || unit === 'text' || value.trim() === '') return value
  const number = Number(value)
  return Number.isNaN(number) ? value : number
}

function missingColumns(columns: readonly ListColumn[], mapping: ListMapping): Finding[] {
  const has = (name: string) => columns.some((column) => column.name === name)
  const wanted: [string | null, string][] = [
    [mapping.ra, mapping.frame === 'GALACTIC' ? 'galactic longitude' : 'right ascension'],
    [mapping.dec, mapping.frame === 'GALACTIC' ? 'galactic latitude' : 'declination'],
    [mapping.name, 'name'],
    [mapping.redshift, 'redshift'],
  ]
  const findings = wanted.flatMap(([name, what]) => {
    if (name === null || has(name)) return []
    const sentence =
      name === ''
        ? `Choose the column of the ${what}.`
        : `The file has no column '${name}' for the ${what}; choose another.`
    return [{ sentence, stops: true }]
  })
  if (mapping.ra !== '' && mapping.ra === mapping.dec) {
    findings.push({ sentence: `The column '${mapping.ra}' cannot be both coordinates; choose two.`, stops: true })
  }
  return findings
}

function placesOf(file: ListFile, mapping: ListMapping, rows: readonly ListRow[]) {
  const [raAt, decAt] = [columnAt(file, mapping.ra), columnAt(file, mapping.dec)]
  return checked(file, mapping, {
    numbers: rows.map(({ number }) => number),
    ra: rows.map(({ values }) => values[raAt]),
    dec: rows.map(({ values }) => values[decAt]),
  })
}

interface RawPlaces {
  numbers: readonly number[]
  ra: (string | number)[]
  dec: (string | number)[]
}

const isOfHours = (kind: PositionProblem['kind']) => kind === 'hours' || kind === 'perhaps-hours'
const MERELY_TOLD: ReadonlySet<PositionProblem['kind']> = new Set(['missing', 'perhaps-hours'])

/** Missing positions and a doubt about few are told; everything else that is wrong stops the list. */
function checked(
  file: ListFile,
  mapping: ListMapping,
  { numbers, ra, dec }: RawPlaces,
): { positions: Positions; usable: number; findings: Finding[]; faulty: number[] } {
  const names: RowNames =
    file.format === 'csv'
      ? { one: 'line', many: 'lines', numberOf: (place) => numbers[place] }
      : { one: 'row', many: 'rows', numberOf: (place) => numbers[place] }
  const units = { ra: mapping.raUnit, dec: mapping.decUnit }
  const { positions, usable, problems } = checkPositions(ra, dec, units, names)
  const isGalactic = mapping.frame === 'GALACTIC'
  const findings = problems
    .filter(({ kind }) => !(isGalactic && isOfHours(kind)))
    .map((problem) => ({ sentence: inFrame(adviceFor(problem), isGalactic), stops: !MERELY_TOLD.has(problem.kind) }))
  if (usable === 0)
    findings.push({ sentence: 'No row has a position that can be used; nothing would match.', stops: true })
  const rowsAtFault = problems.flatMap(({ kind, rows }) => (isOfHours(kind) ? [] : rows))
  const faulty = [...new Set(rowsAtFault)].sort((a, b) => a - b)
  return {
    positions: inIcrs(positions, mapping.frame),
    usable,
    findings: [...framesOf(file, mapping), ...findings],
    faulty,
  }
}

/** What the file says of the chosen columns and cannot be done stops the list: in silence its positions would be degrees off. */
function framesOf({ columns }: ListFile, { ra, dec }: ListMapping): Finding[] {
  const said = (name: string) => foreignFrame(columns.find((column) => column.name === name)?.frame, ra, dec)
  const sentence = said(ra) ?? said(dec)
  return sentence === null ? [] : [{ sentence, stops: true }]
}

function adviceFor({ kind, message }: PositionProblem): string {
  if (kind === 'swapped') return `${message} Swap them.`
  return kind === 'hours' ? `${message} Choose hours as the unit.` : message
}

function inFrame(sentence: string, isGalactic: boolean): string {
  if (!isGalactic) return sentence
  const words = [
    [/right ascension/g, 'galactic longitude'],
    [/declination/g, 'galactic latitude'],
  ] as const
  return words.reduce((text, [from, to]) => text.replace(from, to), sentence)
}

function inIcrs(positions: Positions, frame: ListMapping['frame']): Positions {
  if (frame === 'ICRS') return positions
  const { raDeg, decDeg } = positions
  for (let place = 0; place < raDeg.length; place++) {
    if (Number.isNaN(raDeg[place])) continue
    const [ra, dec] = anglesDeg(toIcrs(frame, unitVector(raDeg[place], decDeg[place])))
    raDeg[place] = ra
    decDeg[place] = dec
  }
  return positions
}

function findingsOf(faults: FileFaults, rows: number): Finding[] {
  const findings: Finding[] = faults.sentences.map((sentence) => ({ sentence, stops: faults.isCutOff }))
  if (faults.isCutOff) {
    const sentence = `The list may have been cut off on its way: ${rows.toLocaleString('en')} rows can be read. Fetch it again and send it whole.`
    findings.push({ sentence, stops: true })
  }
  if (faults.leftOut > 0) {
    const lines = faults.leftOut === 1 ? 'One line is' : `${faults.leftOut.toLocaleString('en')} lines are`
    findings.push({ sentence: `${lines} left out. ${faults.first}`, stops: true })
  }
  if (rows === 0) findings.push({ sentence: 'The file has no rows.', stops: true })
  return findings
}

function readRow(
  file: ListFile,
  mapping: ListMapping,
  row: ListRow,
  positions: Positions | null,
  place: number,
): ReadRow {
  const raDeg = positions?.raDeg[place] ?? Number.NaN
  const decDeg = positions?.decDeg[place] ?? Number.NaN
  const name = mapping.name === null ? '' : plain(textAt(file, row, mapping.name))
  const more: Record<string, string> = {}
  for (const column of mapping.more) {
    const text = plain(textAt(file, row, column))
    if (text !== '' && text !== 'NaN') more[column] = text
  }
  return {
    row: row.number,
    name: name || `no. ${row.number}`,
    raDeg: Number.isNaN(raDeg) ? null : raDeg,
    decDeg: Number.isNaN(raDeg) ? null : decDeg,
    redshift: mapping.redshift === null ? null : redshiftOf(textAt(file, row, mapping.redshift)),
    more,
  }
}

/** Without what XML cannot hold and no table shows. */
const plain = (text: string): string =>
  text
    .replace(/[\u0000-\u001f\u007f\ufffe\uffff]+/g, ' ')
    .trim()
    .slice(0, LONGEST_TEXT)

/** Lists write -1, -99 and the like for none. */
function redshiftOf(text: string): number | null {
  const number = text.trim() === '' ? Number.NaN : Number(text)
  return Number.isFinite(number) && number > -0.1 ? number : null
}
