/** A file of known objects, CSV or VOTable, as columns and rows. Runs in a worker: no database, no settings. */
import { createReadStream, openSync, readSync, closeSync } from 'node:fs'
import { CsvRecords, type CsvRecord } from '@/lib/science/formats/csv-records'
import { readVotable } from '@/lib/science/formats/read-votable'
import type { ListColumn } from './list-mapping'

export interface ListRow {
  /** the line of a CSV, the row of a VOTable, from 1 */
  number: number
  /** one for each column; empty text and NaN are missing */
  values: (string | number)[]
}

export interface ListFile {
  format: 'csv' | 'votable'
  columns: ListColumn[]
  /** The rows that can be read, some thousand at a time. */
  batches: AsyncIterable<ListRow[]>
  /** What was wrong with the file so far, in sentences; whole once the rows have been read. */
  faults: FileFaults
}

/** Records that are left out, and what makes the whole file doubtful. */
export class FileFaults {
  readonly sentences: string[] = []
  leftOut = 0
  first = ''
  /** The file seems to end in its middle. */
  isCutOff = false

  leaveOut(sentence: string): void {
    this.leftOut++
    this.first ||= sentence
  }
}

/** The file is no list. The message is a sentence that says what to do. */
export class ListFileError extends Error {
  readonly name = 'ListFileError'
}

/** A stray control character in a name is no reason to refuse a list. */
const MOST_ODD_SHARE = 0.02
const MOST_ODD_BYTES = 8

const PIECE_BYTES = 262_144

/**
 * @param limitBytes of a look at the beginning: what is behind it is not read and not missed.
 * @throws ListFileError
 */
export async function openList(path: string, limitBytes = Infinity): Promise<ListFile> {
  const start = firstBytes(path)
  assertText(start)
  const text = new TextDecoder(start[1] === 0 || start[0] === 0xff ? 'utf-16le' : 'utf-8').decode(start)
  return /^\ufeff?\s*</.test(text) ? votable(path, limitBytes) : csv(path, limitBytes)
}

function firstBytes(path: string): Uint8Array {
  const file = openSync(path, 'r')
  try {
    const bytes = new Uint8Array(512)
    return bytes.subarray(0, readSync(file, bytes, 0, 512, 0))
  } finally {
    closeSync(file)
  }
}

function assertText(start: Uint8Array): void {
  const begins = (text: string) => text === String.fromCharCode(...start.subarray(0, text.length))
  if (start.length === 0) throw new ListFileError('The file is empty. Choose the file of the list again.')
  if (start[0] === 0x1f && start[1] === 0x8b)
    throw new ListFileError('The file is compressed with gzip. Unpack it and send the file inside.')
  if (begins('PK'))
    throw new ListFileError('The file is a zip archive or a spreadsheet. Save the table as CSV and send that.')
  if (begins('SIMPLE  =')) {
    throw new ListFileError(
      'The file is FITS. Save its table as CSV or VOTable, for instance with stilts tpipe ofmt=csv.',
    )
  }
  assertPlain(start)
}

/** Bytes that no text has: of the control characters all but tab, line ends and form feed. In UTF-16 every second byte is 0. */
function assertPlain(start: Uint8Array): void {
  const isWide = (start[0] === 0xff && start[1] === 0xfe) || (start[0] === 0xfe && start[1] === 0xff) || start[1] === 0
  const odd = start.filter((byte) => (byte < 0x20 && ![9, 10, 12, 13].includes(byte)) || byte === 0x7f).length
  if (!isWide && odd > Math.max(MOST_ODD_BYTES, start.length * MOST_ODD_SHARE)) {
    throw new ListFileError(
      'The file is no text, so it is neither CSV nor VOTable. Save the table as one of them and send that.',
    )
  }
}

const textOf = (value: string | number): string =>
  typeof value === 'number' ? (Number.isNaN(value) ? '' : String(value)) : value

/** Column names as they are, numbered where they are empty or come again. */
function uniqueNames(names: readonly string[]): string[] {
  const seen = new Set<string>()
  return names.map((name, place) => {
    const plain = name.trim() || `column ${place + 1}`
    let unique = plain
    for (let number = 2; seen.has(unique); number++) unique = `${plain} (${number})`
    seen.add(unique)
    return unique
  })
}

async function votable(path: string, limitBytes: number): Promise<ListFile> {
  const table = await readVotable(beginningOf(path, limitBytes))
  const isWhole = table.isComplete || limitBytes === Infinity
  const faults = new FileFaults()
  faults.isCutOff = !table.isComplete && limitBytes === Infinity
  if (table.fields.length === 0) {
    throw new ListFileError(table.problems[0]?.message ?? 'The file holds no table. Choose another one.')
  }
  // What a look cuts off itself is no fault of the file.
  const problems = isWhole ? table.problems : table.problems.slice(0, -1)
  for (const { line, message } of problems.slice(0, 5))
    faults.sentences.push(line === null ? message : `Line ${line}: ${message}`)
  if (problems.length > 5) faults.sentences.push(`And ${problems.length - 5} more of that kind.`)
  const names = uniqueNames(table.fields.map(({ name }) => name))
  const valueAt = (column: number, row: number): string | number => {
    const value = table.columns[column][row]
    return typeof value === 'number' || typeof value === 'string' ? value : value === null ? '' : String(value)
  }
  async function* batches() {
    for (let start = 0; start < table.rowCount; start += 2000) {
      const rows: ListRow[] = []
      for (let row = start; row < Math.min(start + 2000, table.rowCount); row++) {
        rows.push({ number: row + 1, values: names.map((_, column) => valueAt(column, row)) })
      }
      yield rows
    }
  }
  const sampleOf = (column: number): string => {
    for (let row = 0; row < Math.min(50, table.rowCount); row++) {
      const text = textOf(valueAt(column, row))
      if (text.trim() !== '') return text
    }
    return ''
  }
  const columns = table.fields.map(({ unit, ucd, frame }, column) => ({
    name: names[column],
    unit,
    ucd,
    frame,
    sample: sampleOf(column),
  }))
  return { format: 'votable', columns, batches: batches(), faults }
}

async function* beginningOf(path: string, limitBytes: number): AsyncGenerator<Uint8Array> {
  let read = 0
  for await (const piece of createReadStream(path, { highWaterMark: PIECE_BYTES })) {
    yield piece as Uint8Array
    read += (piece as Uint8Array).length
    if (read >= limitBytes) return
  }
}

/** Batches of records; the last one of a look is left out, since it may go on behind the limit. */
async function* recordsOf(path: string, limitBytes: number, reader: CsvRecords): AsyncGenerator<CsvRecord[]> {
  let read = 0
  for await (const piece of beginningOf(path, limitBytes)) {
    read += piece.length
    yield reader.push(piece)
    if (reader.isBroken) return
  }
  if (read < limitBytes) yield reader.end()
}

const isNumber = (text: string) => text.trim() !== '' && !Number.isNaN(Number(text))

async function csv(path: string, limitBytes: number): Promise<ListFile> {
  const reader = new CsvRecords()
  const source = recordsOf(path, limitBytes, reader)
  const faults = new FileFaults()
  const begun: CsvRecord[] = []
  // Enough records to find the header behind comments and a value of each column.
  for await (const records of once(source)) {
    begun.push(...records)
    if (begun.filter(({ fields }) => !isComment(fields)).length >= 50) break
  }
  const comments = begun.findIndex(({ fields }) => !isComment(fields))
  const [head, ...first] = comments < 0 ? [] : begun.slice(comments)
  if (!head) throw new ListFileError('The file holds no table: it needs a header line with the names of its columns.')
  const { names, isHeader } = headerOf(begun[comments - 1]?.fields, head.fields)
  if (names.length < 2) {
    throw new ListFileError(
      'The file has only one column. Separate the columns with commas, semicolons or tabs, or save it as VOTable.',
    )
  }
  if (!isHeader && !head.fields.every((field) => field.trim() === '' || isNumber(field))) {
    faults.sentences.push(
      `Line ${head.line} holds values where the names of the columns are expected: it is read as a row, and the columns are numbered.`,
    )
  }
  const rest = isHeader ? first : [head, ...first]
  const columns = names.map((name, column) => ({
    name,
    sample: rest.find(({ fields }) => (fields[column] ?? '').trim() !== '')?.fields[column] ?? '',
  }))
  async function* batches() {
    let last: CsvRecord | undefined
    let waiting = rest
    for (;;) {
      const rows: ListRow[] = []
      for (const record of waiting) {
        last = record
        const fault = record.fault ?? raggedness(record.fields, names.length)
        if (fault) faults.leaveOut(`Line ${record.line}: ${fault}`)
        else rows.push({ number: record.line, values: names.map((_, column) => record.fields[column] ?? '') })
      }
      if (rows.length > 0) yield rows
      const next = await source.next()
      if (next.done) break
      waiting = next.value
    }
    const endsShort = last !== undefined && last.fields.length < names.length
    faults.isCutOff = limitBytes === Infinity && (reader.isBroken || (reader.endsOpen && endsShort))
    if (faults.isCutOff) faults.sentences.push(`The file seems to end in the middle, at line ${last?.line ?? 1}.`)
  }
  return { format: 'csv', columns, batches: batches(), faults }
}

/** Lets a loop stop without ending the source. */
async function* once<T>(source: AsyncGenerator<T>): AsyncGenerator<T> {
  for (let next = await source.next(); !next.done; next = await source.next()) yield next.value
}

const isComment = (fields: readonly string[]) => fields[0]?.trimStart().startsWith('#') ?? false

/** A number with a fraction or a sexagesimal angle. A name of a column can be a whole number, as of a year, but hardly two of these. */
const looksLikeValue = (field: string): boolean =>
  /^\s*[+\-\u2212]?(\d+[.]\d+|[.]\d+|\d{1,3}[\s:hd°]\s*\d{1,2}[\s:m'′]\s*\d{1,2}([.]\d*)?["″s]?)\s*$/.test(field)

/** The names, from the line itself, from a comment above it, or as numbers where there are none. */
function headerOf(
  comment: readonly string[] | undefined,
  line: readonly string[],
): { names: string[]; isHeader: boolean } {
  const isAllNumbers = line.every((field) => field.trim() === '' || isNumber(field))
  if (!isAllNumbers && line.filter(looksLikeValue).length < 2) return { names: uniqueNames(line), isHeader: true }
  const told =
    comment?.length === line.length
      ? comment.map((field, place) => (place === 0 ? field.replace(/^\s*#\s*/, '') : field))
      : []
  return { names: uniqueNames(line.map((_, place) => told[place] ?? '')), isHeader: false }
}

function raggedness(fields: readonly string[], expected: number): string | null {
  if (fields.length === expected) return null
  if (fields.length > expected && fields.slice(expected).every((field) => field.trim() === '')) return null
  const count = `${fields.length} ${fields.length === 1 ? 'field' : 'fields'}`
  return `this line has ${count} where the header has ${expected}.`
}
