import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { csvLine, readCsv } from './csv'
import { CsvRecords, type CsvRecord } from './csv-records'

function inPieces(bytes: Uint8Array, size: number): { records: CsvRecord[]; reader: CsvRecords } {
  const reader = new CsvRecords()
  const records: CsvRecord[] = []
  for (let at = 0; at < bytes.length; at += size) records.push(...reader.push(bytes.subarray(at, at + size)))
  records.push(...reader.end())
  return { records, reader }
}
const read = (text: string, size = 7) => inPieces(new TextEncoder().encode(text), size)

describe('CSV piece by piece', () => {
  it('gives the records and lines of the whole file, wherever it is cut', () => {
    const cell = fc
      .oneof(fc.string(), fc.constantFrom('1.5', 'a,b', 'line\nbreak', '"quoted"', 'ñ', '✨'))
      .map((text) =>
        // Line ends inside quotes become LF, which is said; what has no other form is compared.
        text.replace(/\r/g, ' ').replace(/^\ufeff/, ''),
      )
    const rows = fc.array(fc.tuple(cell, cell, cell), { minLength: 1, maxLength: 8 })
    fc.assert(
      fc.property(rows, fc.integer({ min: 1, max: 40 }), (body, size) => {
        const text = csvLine(['alpha', 'beta', 'gamma']) + body.map((row) => csvLine(row)).join('')
        const { records } = read(text, size)
        const whole = readCsv(text)
        expect(records.slice(1).map(({ fields }) => fields)).toEqual(
          whole.rows.map(({ values }) => [values.alpha, values.beta, values.gamma]),
        )
        expect(records.slice(1).map(({ line }) => line)).toEqual(whole.rows.map(({ line }) => line))
      }),
    )
  })

  it('takes the delimiter of the header, any line ends, and UTF-16 by its mark', () => {
    expect(read('ra;dec\r\n1;2\r3;4\n').records.map(({ line, fields }) => [line, ...fields])).toEqual([
      [1, 'ra', 'dec'],
      [2, '1', '2'],
      [3, '3', '4'],
    ])
    const utf16 = Uint8Array.from(Buffer.from('\ufeffra\tdec\n1\t2', 'utf16le'))
    const { records, reader } = inPieces(utf16, 3)
    expect(records.map(({ fields }) => fields)).toEqual([
      ['ra', 'dec'],
      ['1', '2'],
    ])
    expect(reader.delimiter).toBe('\t')
    expect(reader.endsOpen).toBe(true)
  })

  it('names the record whose quotes are wrong by the line on which it begins', () => {
    const { records } = read('ra,dec\n1,"2"x\n3,4\n')
    expect(records[1]).toMatchObject({ line: 2, fault: expect.stringContaining('goes on after its closing quote') })
  })

  it('gives up on a quote that is never closed, without holding the file', () => {
    const { records, reader } = read(`ra,dec\n"1,2\n${'3,4\n'.repeat(300_000)}`, 65_536)
    expect(reader.isBroken).toBe(true)
    expect(records.at(-1)).toMatchObject({ line: 2, fault: expect.stringContaining('never closed') })
  })
})
