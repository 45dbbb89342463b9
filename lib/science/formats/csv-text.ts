/** From the bytes of a CSV file to text that a parser reads, and what had to be mended on the way. */

const DELIMITERS = [',', ';', '\t']

export interface CsvProblem {
  /** line in the file, from 1, where the record begins; null for the file as a whole */
  line: number | null
  /** a sentence: what is wrong and what to do */
  message: string
}

export interface CsvText {
  text: string
  /** number of the line in the file on which the text begins */
  firstLine: number
  problems: CsvProblem[]
}

/** Decodes by byte-order mark, else as UTF-8, and takes off the mark and the line 'sep=;' that spreadsheets write. */
export function csvText(parts: readonly (string | Uint8Array)[]): CsvText {
  const encoder = new TextEncoder()
  const isText = parts.every((part) => typeof part === 'string')
  const decoded = isText
    ? parts.join('')
    : decode(joined(parts.map((part) => (typeof part === 'string' ? encoder.encode(part) : part))))
  const text = decoded.replace(/^\ufeff/, '')
  const problems: CsvProblem[] = []
  const damaged = isText ? -1 : text.indexOf('\ufffd')
  if (damaged >= 0) {
    problems.push({
      line: countLineBreaks(text.slice(0, damaged)) + 1,
      message: 'Some characters here are not UTF-8 and were replaced by \ufffd. Save the file with the encoding UTF-8.',
    })
  }
  const separatorLine = /^sep=.(\r\n|\r|\n)/.exec(text)
  if (separatorLine) return { text: text.slice(separatorLine[0].length), firstLine: 2, problems }
  return { text, firstLine: 1, problems }
}

function joined(parts: readonly Uint8Array[]): Uint8Array {
  const bytes = new Uint8Array(parts.reduce((length, part) => length + part.length, 0))
  let offset = 0
  for (const part of parts) {
    bytes.set(part, offset)
    offset += part.length
  }
  return bytes
}

function decode(bytes: Uint8Array): string {
  const encoding =
    bytes[0] === 0xff && bytes[1] === 0xfe ? 'utf-16le' : bytes[0] === 0xfe && bytes[1] === 0xff ? 'utf-16be' : 'utf-8'
  return new TextDecoder(encoding).decode(bytes)
}

/** The delimiter most frequent in the first line that is not blank, outside quotes; a comma when there is none. */
export function delimiterOf(text: string): string {
  const header = text.trimStart().split(/[\r\n]/, 1)[0]
  const unquoted = header.split('"').filter((_, part) => part % 2 === 0)
  const frequency = (delimiter: string) => unquoted.reduce((sum, part) => sum + part.split(delimiter).length - 1, 0)
  return DELIMITERS.reduce((best, next) => (frequency(next) > frequency(best) ? next : best))
}

/**
 * The same text with CR LF and CR as LF, so that a file may mix its line ends; quoted fields, which open only at the
 * beginning of a field, are kept as they are. Linear in the length of the text.
 */
export function withPlainLineEnds(text: string, delimiter: string): string {
  const fieldEnd = new RegExp(`${delimiter}|\r\n|\r|\n`, 'g')
  const parts: string[] = []
  let position = 0
  while (position < text.length) {
    const afterQuotes = text[position] === '"' ? endOfQuotes(text, position) : position
    fieldEnd.lastIndex = afterQuotes
    const end = fieldEnd.exec(text)
    if (!end) {
      parts.push(text.slice(position))
      break
    }
    parts.push(text.slice(position, end.index), end[0] === delimiter ? delimiter : '\n')
    position = end.index + end[0].length
  }
  return parts.join('')
}

/** The place after the quote that closes the one at `open`; the end of the text when none does. */
function endOfQuotes(text: string, open: number): number {
  let close = text.indexOf('"', open + 1)
  while (close >= 0 && text[close + 1] === '"') close = text.indexOf('"', close + 2)
  return close < 0 ? text.length : close + 1
}

/** Line breaks of any kind, CR LF counted once. */
export function countLineBreaks(text: string): number {
  return text.match(/\r\n|\r|\n/g)?.length ?? 0
}
