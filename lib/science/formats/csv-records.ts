/**
 * CSV piece by piece, for files too long to hold: records with the line on which each begins. Otherwise as `readCsv`: any encoding that
 * a byte-order mark tells, else UTF-8; commas, semicolons or tabs; any line ends, which become LF inside quotes too.
 */
import Papa from 'papaparse'
import { countLineBreaks, delimiterOf } from '@/lib/science/formats/csv-text'

export interface CsvRecord {
  /** line in the file, from 1, where the record begins */
  line: number
  fields: string[]
  /** why the record cannot be trusted, a sentence; null for a good one */
  fault: string | null
}

/** A quote that is never closed would take in the rest of the file. */
const LONGEST_RECORD = 1_000_000

interface Parsed {
  data: string[][]
  errors: { code: string; row?: number }[]
  meta: { cursor: number }
}

export class CsvRecords {
  private decoder: TextDecoder | null = null
  private text = ''
  private line = 1
  private parser: Papa.Parser | null = null
  /** What the header goes by; a comma until it has been seen. */
  delimiter = ','
  /** The file ends in the middle of a record or behind its last field without a line end. */
  endsOpen = false
  /** A quoted field was never closed: nothing behind it is read. */
  isBroken = false

  /** Records that are whole by now; blank ones are left out. */
  push(bytes: Uint8Array): CsvRecord[] {
    this.decoder ??= new TextDecoder(encodingOf(bytes))
    return this.take(this.decoder.decode(bytes, { stream: true }), false)
  }

  /** What is left when there are no more bytes. */
  end(): CsvRecord[] {
    return this.take(this.decoder?.decode() ?? '', true)
  }

  private take(piece: string, isLast: boolean): CsvRecord[] {
    if (this.isBroken) return []
    this.text += piece
    const held = !isLast && this.text.endsWith('\r') ? '\r' : ''
    const text = (held ? this.text.slice(0, -1) : this.text).replace(/\r\n?/g, '\n')
    if (!this.parser) {
      if (!isLast && !text.trimStart().includes('\n')) {
        this.text = text + held
        return []
      }
      this.delimiter = delimiterOf(text)
      this.parser = new Papa.Parser({ delimiter: this.delimiter, newline: '\n' })
    }
    if (isLast) this.endsOpen = text !== '' && !text.endsWith('\n')
    const { data, errors, meta } = this.parser.parse(text, 0, !isLast) as Parsed
    this.text = (isLast ? '' : text.slice(meta.cursor)) + held
    const records = this.numbered(data, errors)
    if (this.text.length <= LONGEST_RECORD || isLast) return records
    this.isBroken = true
    records.push({ line: this.line, fields: [], fault: quoteFault('MissingQuotes') })
    return records
  }

  private numbered(data: readonly string[][], errors: Parsed['errors']): CsvRecord[] {
    // The first fault of a record is its cause.
    const faults = new Map(errors.toReversed().map(({ row, code }) => [row, quoteFault(code)]))
    const records: CsvRecord[] = []
    for (const [row, fields] of data.entries()) {
      const fault = faults.get(row) ?? null
      if (fault !== null || fields.some((field) => field.trim() !== ''))
        records.push({ line: this.line, fields, fault })
      this.line++
      for (const field of fields) if (field.includes('\n')) this.line += countLineBreaks(field)
    }
    return records
  }
}

function encodingOf(bytes: Uint8Array): string {
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return 'utf-16le'
  return bytes[0] === 0xfe && bytes[1] === 0xff ? 'utf-16be' : 'utf-8'
}

function quoteFault(code: string): string {
  return code === 'MissingQuotes'
    ? 'A quoted field that begins here is never closed, so that what follows is not read. Add the closing quote.'
    : 'A quoted field in this record goes on after its closing quote. Write a quote inside a field twice ("").'
}
