/** Our CSV before the readers that people use: papaparse, in the reading of RFC 4180, and astropy's default CSV reader. */
import { readFile } from 'node:fs/promises'
import Papa from 'papaparse'
import { beforeAll, expect, it } from 'vitest'
import {
  SAMPLE_COLUMNS,
  SAMPLE_LENSES,
  removeDocumentsAfterwards,
  writeDocument,
} from '@/tests/conformance/_table-sample'
import { askAstropy, describeConformance } from '@/tests/conformance/_table-tools'
import type { CellValue } from '@/lib/science/formats/columns'
import { csvDocument } from '@/lib/science/formats/write-csv'

interface AstropyCsv {
  columns: string[]
  rows: CellValue[][]
  records: string[][]
}

removeDocumentsAfterwards()

const names = SAMPLE_COLUMNS.map((column) => column.name)
const valuesOf = (row: (typeof SAMPLE_LENSES)[number]) => SAMPLE_COLUMNS.map((column) => column.value(row))

describeConformance('a catalogue as CSV', () => {
  let path = ''

  beforeAll(async () => {
    path = await writeDocument('catalogue.csv', csvDocument(SAMPLE_COLUMNS, SAMPLE_LENSES))
  })

  it('gives papaparse every value, numbers to the last bit, text to the last character', async () => {
    const { data, errors } = Papa.parse<string[]>(await readFile(path, 'utf8'), { skipEmptyLines: true })
    expect(errors).toEqual([])
    expect(data[0]).toEqual(names)
    const typed = data.slice(1).map((row) => row.map((text, column) => typedAs(SAMPLE_COLUMNS[column].datatype, text)))
    expect(typed).toEqual(SAMPLE_LENSES.map(valuesOf))
  })

  it("gives Python's csv module the same fields", () => {
    const { records } = askAstropy<AstropyCsv>('read-csv.py', path)
    expect(records[0]).toEqual(names)
    const typed = records
      .slice(1)
      .map((row) => row.map((text, column) => typedAs(SAMPLE_COLUMNS[column].datatype, text)))
    expect(typed).toEqual(SAMPLE_LENSES.map(valuesOf))
  })

  it('gives astropy every value, numbers to the last bit', () => {
    const { columns, rows } = askAstropy<AstropyCsv>('read-csv.py', path)
    expect(columns).toEqual(names)
    expect(rows).toEqual(SAMPLE_LENSES.map((lens) => valuesOf(lens).map(asAstropyReads)))
  })

  it('keeps every kind of line end inside a field for papaparse and the csv module', async () => {
    const remark = 'one\r\ntwo\rthree\n\nfour'
    const file = await writeDocument('ends.csv', csvDocument(SAMPLE_COLUMNS, [{ ...SAMPLE_LENSES[0], remark }]))
    const { data } = Papa.parse<string[]>(await readFile(file, 'utf8'), { newline: '\r\n' })
    expect(data[1].at(-1)).toBe(remark)
    expect(askAstropy<AstropyCsv>('read-csv.py', file).records[1].at(-1)).toBe(remark)
  })
})

/**
 * CSV has no type for booleans: astropy reads them as text. Its reader cuts the file into lines before it looks at quotes, so
 * that inside a field it drops blank lines and takes U+2028 for a line end; the VOTable has neither limit.
 */
function asAstropyReads(value: CellValue): CellValue {
  if (typeof value === 'boolean') return String(value)
  return typeof value === 'string' ? value.replaceAll('\u2028', '\n').replace(/\n+/g, '\n') : value
}

function typedAs(datatype: string, text: string): CellValue {
  if (text === '') return null
  if (datatype === 'boolean') return text === 'true'
  return datatype === 'char' || datatype === 'unicodeChar' ? text : Number(text)
}
