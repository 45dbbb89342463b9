import fc from 'fast-check'
import Papa from 'papaparse'
import { describe, expect, it } from 'vitest'
import { csvLine, readCsv } from '@/lib/science/formats/csv'

const bytes = (text: string) => new TextEncoder().encode(text)
const valuesOf = (text: string) => readCsv(text).rows.map((row) => ({ ...row.values }))

describe('csvLine', () => {
  // RFC 4180 section 2, rules 1 and 5 to 7.
  it('ends a record with CR LF and quotes exactly as RFC 4180 says', () => {
    expect(csvLine(['a', 'b c', 1, true, null])).toBe('a,b c,1,true,\r\n')
    expect(csvLine(['a,b', 'say "x"', 'two\nlines', 'cr\rlf\r\n'])).toBe(
      '"a,b","say ""x""","two\nlines","cr\rlf\r\n"\r\n',
    )
  })

  it('quotes text with blanks at its ends, which some readers would cut off', () => {
    expect(csvLine([' a', 'b ', '\tc'])).toBe('" a","b ","\tc"\r\n')
  })

  it('quotes text with what Unicode takes for a line end', () => {
    expect(csvLine(['a\u2028b', 'c\u0085d', 'e\vf'])).toBe('"a\u2028b","c\u0085d","e\vf"\r\n')
  })

  it('keeps a leading = as it is', () => {
    expect(csvLine(['=SUM(A1:A9)', '+1', '@x'])).toBe('=SUM(A1:A9),+1,@x\r\n')
  })

  it('tells null from empty text, and writes no line that readers would skip', () => {
    expect(csvLine([null, ''])).toBe(',""\r\n')
    expect(csvLine([null])).toBe('""\r\n')
  })

  it('writes numbers that read back as the same double', () => {
    fc.assert(
      fc.property(fc.double(), (number) => {
        expect(Number(csvLine([number]).trim())).toBe(number)
      }),
    )
    expect(csvLine([-0, NaN, Infinity, -Infinity, 1e-13])).toBe('-0,NaN,Infinity,-Infinity,1e-13\r\n')
  })

  it('gives any text back through papaparse and through readCsv', () => {
    const text = fc.string({ unit: 'binary' })
    fc.assert(
      fc.property(fc.array(fc.array(text, { minLength: 3, maxLength: 3 }), { minLength: 1 }), (rows) => {
        const written = [['x', 'y', 'z'], ...rows].map((row) => csvLine(row)).join('')
        expect(Papa.parse(written, { newline: '\r\n', delimiter: ',' }).data.slice(1, -1)).toEqual(rows)
        const notBlank = rows.filter((row) => row.some((field) => field.trim() !== ''))
        const read = readCsv(written)
        expect(read.problems).toEqual([])
        expect(read.rows.map(({ values }) => [values.x, values.y, values.z])).toEqual(notBlank)
      }),
    )
  })
})

describe('readCsv reads what people save', () => {
  const expected = [
    { name: 'a', ra: '1.5' },
    { name: 'b', ra: '2.5' },
  ]

  it.each([
    ['commas', 'name,ra\na,1.5\nb,2.5\n'],
    ['semicolons', 'name;ra\na;1.5\nb;2.5\n'],
    ['tabs', 'name\tra\na\t1.5\nb\t2.5\n'],
    ['CR LF', 'name,ra\r\na,1.5\r\nb,2.5\r\n'],
    ['CR alone', 'name,ra\ra,1.5\rb,2.5'],
    ['mixed line ends', 'name,ra\r\na,1.5\nb,2.5\r'],
    ['no last line end', 'name,ra\na,1.5\nb,2.5'],
    ['blank lines and lines of bare delimiters', '\n\nname,ra\n\na,1.5\n,\n  \nb,2.5\n\n'],
    ['a byte-order mark', '\ufeffname,ra\na,1.5\nb,2.5\n'],
    ['the spreadsheet line sep=;', 'sep=;\r\nname;ra\r\na;1.5\r\nb;2.5\r\n'],
    ['quoted names and blanks around names', '"name", ra \na,1.5\nb,2.5\n'],
    ['empty columns at the right', 'name,ra,,\na,1.5,,\nb,2.5,,,,\n'],
  ])('with %s', (_, text) => {
    const { header, rows, problems } = readCsv(text)
    expect(problems).toEqual([])
    expect(header).toEqual(['name', 'ra'])
    expect(rows.map((row) => ({ ...row.values }))).toEqual(expected)
  })

  it('as bytes in UTF-8 and UTF-16, whole or in pieces that cut a character', async () => {
    const text = '\ufeffname,remark\na,θ und 😀\n'
    const utf16 = (order: (unit: number) => [number, number]) =>
      Uint8Array.from([...text.split('').map((unit) => order(unit.charCodeAt(0)))].flat())
    const read = [
      readCsv(bytes(text)),
      readCsv(utf16((unit) => [unit & 0xff, unit >> 8])),
      readCsv(utf16((unit) => [unit >> 8, unit & 0xff])),
      await readCsv(
        (async function* () {
          for (const byte of bytes(text)) yield Uint8Array.of(byte)
        })(),
      ),
    ]
    for (const { rows, problems } of read) {
      expect(problems).toEqual([])
      expect(rows[0].values.remark).toBe('θ und 😀')
    }
  })

  it('with line breaks of any kind inside quotes kept, and the line on which each record begins', () => {
    const { rows } = readCsv('\r\nname,remark\r\na,"one\r\ntwo\nthree\rfour"\r\nb,"say ""x"""\r\n')
    expect(rows.map((row) => [row.line, row.values.remark])).toEqual([
      [3, 'one\r\ntwo\nthree\rfour'],
      [7, 'say "x"'],
    ])
  })

  it('counts the line sep=; among the lines', () => {
    expect(readCsv('sep=;\nname;ra\na;1\n').rows[0].line).toBe(3)
  })

  it('with a comma inside quotes in the header while semicolons delimit', () => {
    expect(valuesOf('"a, b, c, d";ra\nx;1\n')).toEqual([{ 'a, b, c, d': 'x', ra: '1' }])
  })

  it('with a column named like a property of every object', () => {
    const { rows } = readCsv('__proto__,constructor\nx,y\n')
    expect(Object.entries(rows[0].values)).toEqual([
      ['__proto__', 'x'],
      ['constructor', 'y'],
    ])
  })
})

describe('readCsv names what it cannot trust, and reads the rest', () => {
  it('a record with too few or too many fields', () => {
    const { rows, problems } = readCsv('name,ra,dec\na,1,2\nb,1\nc,1,2,3\nd,4,5\n')
    expect(rows.map((row) => row.values.name)).toEqual(['a', 'd'])
    expect(problems).toEqual([
      {
        line: 3,
        message: 'This record has 2 fields where the header has 3. Leave a field empty, but keep its delimiter.',
      },
      {
        line: 4,
        message: 'This record has 4 fields where the header has 3. Put a field that holds the delimiter in quotes.',
      },
    ])
  })

  it('a name that two columns have, whatever its case: the first is read', () => {
    const { header, rows, problems } = readCsv('\nname,ra,Name\na,1,z\n')
    expect(header).toEqual(['name', 'ra'])
    expect({ ...rows[0].values }).toEqual({ name: 'a', ra: '1' })
    expect(problems).toEqual([
      { line: 2, message: "Columns 1 and 3 are both named 'Name'; only the first is read. Rename one." },
    ])
  })

  it('a column with values and no name', () => {
    const { header, problems } = readCsv('name,,ra\na,x,1\n')
    expect(header).toEqual(['name', 'ra'])
    expect(problems).toEqual([
      { line: 1, message: 'Column 2 has no name in the header, so that its values are not read. Name it.' },
    ])
  })

  it('a quote that never closes, with the lines that it swallowed', () => {
    const { rows, problems } = readCsv('name,ra\na,1\nb,"2\nc,3\nd,4\n')
    expect(rows.map((row) => row.values.name)).toEqual(['a'])
    expect(problems).toHaveLength(1)
    expect(problems[0].line).toBe(3)
    expect(problems[0].message).toContain('never closed')
    expect(problems[0].message).toContain('Lines 3 to 5 ran together')
  })

  it('text after a closing quote', () => {
    const { rows, problems } = readCsv('name,ra\na,1\nb,"2" x\nc,3\n')
    expect(rows.map((row) => row.values.name)).toEqual(['a'])
    expect(problems[0]).toMatchObject({ line: 3, message: expect.stringContaining('goes on after its closing quote') })
    expect(problems[0].message).toContain('Lines 3 to 4 ran together')
  })

  it('nothing where a quote stands inside a field, as in inches, while line ends are CR LF', () => {
    expect(valuesOf('name,size\r\na,5" wide\r\nb,7\r\n')).toEqual([
      { name: 'a', size: '5" wide' },
      { name: 'b', size: '7' },
    ])
  })

  it('nor takes forever over a file of blanks, tabs or quotes', () => {
    for (const character of [' ', '\t', '"', '\n', ',']) {
      expect(readCsv(character.repeat(300_000)).rows).toEqual([])
    }
  })

  it('bytes that are not UTF-8, with their line', () => {
    const { rows, problems } = readCsv(Uint8Array.from([...bytes('name\na\n'), 0xe9, ...bytes('t\u00e9\n')]))
    expect(rows.map((row) => row.values.name)).toEqual(['a', '\ufffdté'])
    expect(problems).toEqual([{ line: 3, message: expect.stringContaining('not UTF-8') }])
  })

  it.each([[''], ['\n \n'], ['\ufeff']])('an empty file: %j', (text) => {
    expect(readCsv(text)).toMatchObject({ header: [], rows: [], problems: [{ line: null }] })
    expect(readCsv(text).problems[0].message).toContain('The file is empty')
  })

  it('nothing in a file with a header alone', () => {
    expect(readCsv('name,ra\n')).toEqual({ header: ['name', 'ra'], delimiter: ',', rows: [], problems: [] })
  })

  it('and never throws, whatever the bytes', () => {
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 60 }), (input) => {
        const { rows, problems } = readCsv(input)
        for (const row of rows) expect(row.line).toBeGreaterThan(0)
        for (const problem of problems) expect(problem.message).toMatch(/\.$/)
      }),
      { numRuns: 300 },
    )
    fc.assert(
      fc.property(fc.string({ unit: fc.constantFrom('"', ',', ';', '\n', '\r', 'a', ' '), maxLength: 40 }), (input) => {
        expect(() => readCsv(input)).not.toThrow()
      }),
      { numRuns: 1000 },
    )
  })
})
