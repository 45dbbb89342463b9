/** CSV after RFC 4180: one writer for everything that leaves, one reader for what comes in. */
import Papa from 'papaparse'
import type { CellValue } from '@/lib/science/formats/columns'
import {
  countLineBreaks,
  csvText,
  delimiterOf,
  withPlainLineEnds,
  type CsvProblem,
} from '@/lib/science/formats/csv-text'

/**
 * What RFC 4180 makes us quote, and beyond it: blanks at the ends, which some readers cut off, and the other characters that
 * Unicode takes for line ends, at which readers that cut a file into lines first (astropy) would break a bare field.
 */
const MUST_QUOTE = /[",\r\n\v\f\x1c-\x1e\x85\u2028\u2029]|^\s|\s$/

/**
 * One record of RFC 4180 with its CR LF.
 * null is an empty field, '' is "" so that a reader who cares can tell them apart. Numbers are the shortest text that reads
 * back as the same double; NaN, Infinity and -Infinity are written as those words. Text is exact, a leading = too: a guard
 * against spreadsheet formulas would change the data.
 */
export function csvLine(fields: readonly CellValue[]): string {
  // A lone empty field would be an empty line, which readers skip.
  if (fields.length === 1 && fields[0] === null) return '""\r\n'
  return fields.map(csvField).join(',') + '\r\n'
}

function csvField(value: CellValue): string {
  if (value === null) return ''
  if (typeof value === 'number') return Object.is(value, -0) ? '-0' : String(value)
  if (typeof value === 'boolean') return String(value)
  return value === '' || MUST_QUOTE.test(value) ? `"${value.replaceAll('"', '""')}"` : value
}

export interface CsvRow {
  /** line in the file, from 1, where the record begins */
  line: number
  /** text of each named column, exactly as written; no prototype */
  values: Record<string, string>
}

export interface CsvTable {
  /** column names in order, trimmed; columns without a name or with a repeated one are left out */
  header: string[]
  delimiter: string
  rows: CsvRow[]
  /** in the order of the lines; a record named here is not among the rows */
  problems: CsvProblem[]
}

type Bytes = AsyncIterable<string | Uint8Array>

/**
 * Reads a table with a header line, as people save it: with or without a byte-order mark, in UTF-8 or UTF-16, with commas,
 * semicolons or tabs (the one most frequent in the header), with any line ends, also inside quotes, with blank lines.
 * Never throws on bad content: each record that cannot be trusted is named in `problems` and left out, the rest is read.
 */
export function readCsv(input: string | Uint8Array): CsvTable
export function readCsv(input: Bytes): Promise<CsvTable>
export function readCsv(input: string | Uint8Array | Bytes): CsvTable | Promise<CsvTable> {
  if (typeof input === 'string' || input instanceof Uint8Array) return readWhole([input])
  return gather(input).then(readWhole)
}

async function gather(input: Bytes): Promise<(string | Uint8Array)[]> {
  const parts: (string | Uint8Array)[] = []
  for await (const part of input) parts.push(part)
  return parts
}

interface CsvRecord {
  line: number
  fields: string[]
  fault: string | null
}

function readWhole(parts: readonly (string | Uint8Array)[]): CsvTable {
  const { text, firstLine, problems } = csvText(parts)
  const delimiter = delimiterOf(text)
  const [head, ...records] = recordsOf(withPlainLineEnds(text, delimiter), firstLine, delimiter)
  if (!head) {
    problems.push({ line: null, message: 'The file is empty: it needs a header line with the names of its columns.' })
    return { header: [], delimiter, rows: [], problems }
  }
  if (head.fault) problems.push({ line: head.line, message: head.fault })
  const names = columnNames(head, records, problems)
  const rows: CsvRow[] = []
  for (const record of records) {
    const fault = record.fault ?? raggedness(record.fields, head.fields.length)
    if (fault) problems.push({ line: record.line, message: fault })
    else rows.push({ line: record.line, values: valuesOf(names, record.fields) })
  }
  return { header: names.filter((name) => name !== null), delimiter, rows, problems }
}

/** The records that are not blank, each with the line it begins on. */
function recordsOf(text: string, firstLine: number, delimiter: string): CsvRecord[] {
  const records: CsvRecord[] = []
  let line = firstLine
  let read = 0
  Papa.parse<string[]>(text, {
    delimiter,
    newline: '\n',
    step: ({ data, errors, meta }) => {
      const isBlank = data.every((field) => field.trim() === '')
      const source = text.slice(read, meta.cursor)
      const lastLine = line + countLineBreaks(source.replace(/\n$/, ''))
      const fault = errors.length > 0 ? quoteFault(errors[0].code, line, lastLine) : null
      if (!isBlank || fault) records.push({ line, fields: data, fault })
      line += countLineBreaks(source)
      read = meta.cursor
    },
  })
  return records
}

function quoteFault(code: string, line: number, lastLine: number): string {
  const lost = lastLine > line ? ` Lines ${line} to ${lastLine} ran together because of it and are not read.` : ''
  return code === 'MissingQuotes'
    ? `A quoted field in this record is never closed. Add the closing quote.${lost}`
    : `A quoted field in this record goes on after its closing quote. Write a quote inside a field twice ("").${lost}`
}

function raggedness(fields: readonly string[], expected: number): string | null {
  const isPadded = fields.length > expected && fields.slice(expected).every((field) => field.trim() === '')
  if (fields.length === expected || isPadded) return null
  const more = fields.length > expected
  const advice = more
    ? 'Put a field that holds the delimiter in quotes.'
    : 'Leave a field empty, but keep its delimiter.'
  return `This record has ${fields.length} ${fields.length === 1 ? 'field' : 'fields'} where the header has ${expected}. ${advice}`
}

/** The name of each column, null where it cannot be used; says why in `problems`. */
function columnNames(head: CsvRecord, records: readonly CsvRecord[], problems: CsvProblem[]): (string | null)[] {
  const firstWith = new Map<string, number>()
  return head.fields.map((field, column) => {
    const name = field.trim()
    if (name === '') {
      if (records.some((record) => (record.fields[column] ?? '').trim() !== '')) {
        const message = `Column ${column + 1} has no name in the header, so that its values are not read. Name it.`
        problems.push({ line: head.line, message })
      }
      return null
    }
    const earlier = firstWith.get(name.toLowerCase())
    if (earlier !== undefined) {
      const message = `Columns ${earlier + 1} and ${column + 1} are both named '${name}'; only the first is read. Rename one.`
      problems.push({ line: head.line, message })
      return null
    }
    firstWith.set(name.toLowerCase(), column)
    return name
  })
}

function valuesOf(names: readonly (string | null)[], fields: readonly string[]): Record<string, string> {
  // Without a prototype, so that a column named __proto__ is a column like any other.
  const values: Record<string, string> = Object.create(null)
  for (const [column, name] of names.entries()) if (name !== null) values[name] = fields[column]
  return values
}
