import { readFileSync } from 'node:fs'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { CellValue, Column, Datatype } from './columns'
import { readVotable, type VotableTable } from './read-votable'
import { votableDocument, type VotableMeta } from './write-votable'
import { votableBinary2Document } from './write-votable-binary2'

const fixture = (name: string) => new Uint8Array(readFileSync(`fixtures/votable/reading/${name}`))
const readFixture = (name: string) => readVotable(fixture(name))
const rowsOf = ({ columns, rowCount }: VotableTable) =>
  Array.from({ length: rowCount }, (_, k) =>
    columns.map((column) => (typeof column[k] === 'number' && Number.isNaN(column[k]) ? null : column[k])),
  )
const wrap = (inside: string) =>
  `<?xml version="1.0"?>\n<VOTABLE version="1.4"><RESOURCE><TABLE name="t">\n${inside}\n</TABLE></RESOURCE></VOTABLE>`
const table = (rows: string) =>
  wrap(
    `<FIELD name="name" datatype="char" arraysize="*"/>\n<FIELD name="ra" datatype="double" unit="deg"/>\n<DATA><TABLEDATA>\n${rows}\n</TABLEDATA></DATA>`,
  )

describe('a VOTable', () => {
  it('in TABLEDATA gives its columns with names, units, UCDs, frames and descriptions', () => {
    const { fields, columns, rowCount, name, description, infos, problems, isComplete } = readFixture('catalogue.vot')
    expect([name, description, rowCount, isComplete, problems]).toEqual([
      'lenses',
      'One row per confirmed lens',
      3,
      true,
      [],
    ])
    expect(infos).toEqual([{ name: 'QUERY_STATUS', value: 'OK' }])
    expect(fields[2]).toEqual({
      name: 'ra',
      id: 'ra',
      datatype: 'double',
      arraysize: null,
      unit: 'deg',
      ucd: 'pos.eq.ra;meta.main',
      utype: null,
      xtype: null,
      description: 'Right ascension of the lens galaxy, ICRS',
      frame: 'ICRS',
      nullValue: null,
    })
    expect(columns[2]).toEqual(Float64Array.of(150.1, 359.9999999, 12.3456789))
    expect(columns[15][0]).toBe('arc north-east; "nice" <b> & counter-image')
    expect(fields[6]).toMatchObject({ name: 'n_graders', nullValue: '-1' })
  })

  // fixtures/votable/reading/make-binary.py: written by astropy 5.2.1.
  const expected = JSON.parse(readFileSync('fixtures/votable/reading/expected.json', 'utf8')) as {
    columns: string[]
    rows: CellValue[][]
  }
  it.each(['binary.vot', 'binary2.vot'])('in %s of astropy gives every datatype to the last bit', (name) => {
    const read = readFixture(name)
    expect(read.problems).toEqual([])
    expect(read.fields.map((field) => field.name)).toEqual(expected.columns)
    expect(rowsOf(read)).toEqual(expected.rows)
  })

  it.each(['catalogue.vot', 'binary2.vot', 'bom_utf8.vot'])('%s reads the same in pieces of any size', async (name) => {
    const bytes = fixture(name)
    for (const size of [1, 7, 1000]) {
      const pieces = Array.from({ length: Math.ceil(bytes.length / size) }, (_, k) =>
        bytes.subarray(k * size, (k + 1) * size),
      )
      expect(await readVotable(pieces)).toEqual(readVotable(bytes))
    }
  })

  it.each(['bom_utf8.vot', 'no_namespace.vot', 'infinity_js.vot'])('%s is read without a word', (name) => {
    const read = readFixture(name)
    expect([read.rowCount, read.isComplete, read.problems]).toEqual([3, true, []])
  })

  it('keeps identifiers of 19 digits', () => {
    const document = wrap(
      '<FIELD name="id" datatype="long"/><DATA><TABLEDATA><TR><TD>4611686018427387905</TD></TR></TABLEDATA></DATA>',
    )
    expect(readVotable(document).columns[0]).toEqual(['4611686018427387905'])
  })

  it('may have a namespace prefix, be UTF-16, or be in CDATA', () => {
    const prefixed = table('<TR><TD><![CDATA[a <b> & c]]></TD><TD>1.5</TD></TR>').replace(/<(\/?)([A-Z])/g, '<$1v:$2')
    expect(rowsOf(readVotable(prefixed.replace('<v:VOTABLE', '<v:VOTABLE xmlns:v="x"')))).toEqual([['a <b> & c', 1.5]])
    const utf16 = Buffer.from('\ufeff' + table('<TR><TD>θ</TD><TD>2</TD></TR>'), 'utf16le')
    expect(rowsOf(readVotable(new Uint8Array(utf16)))).toEqual([['θ', 2]])
  })

  it('has the first of its tables read unless another is asked for, and says so', () => {
    const second =
      '</TABLE><TABLE name="u"><FIELD name="x" datatype="int"/><DATA><TABLEDATA><TR><TD>5</TD></TR></TABLEDATA></DATA>'
    const document = table('<TR><TD>a</TD><TD>1</TD></TR>').replace('</TABLE>', second + '</TABLE>')
    expect(readVotable(document)).toMatchObject({ name: 't', rowCount: 1 })
    expect(readVotable(document).problems[0].message).toBe("The file holds 2 tables; 't' is read.")
    expect(rowsOf(readVotable(document, { table: 1 }))).toEqual([[5]])
  })

  it('without rows has empty columns', () => {
    const read = readVotable(wrap('<FIELD name="ra" datatype="double"/>'))
    expect([read.rowCount, read.columns, read.problems]).toEqual([0, [new Float64Array(0)], []])
  })
})

describe('a VOTable that is damaged', () => {
  it('in the middle of its rows gives the rows before', () => {
    const whole = table(Array.from({ length: 50 }, (_, k) => `<TR><TD>n${k}</TD><TD>${k}</TD></TR>`).join('\n'))
    const half = readVotable(whole.slice(0, whole.indexOf('<TD>n30')))
    expect([half.rowCount, half.isComplete]).toEqual([30, false])
    expect(half.columns.map((column) => column.length)).toEqual([30, 30])
    expect(half.problems).toEqual([
      {
        line: 36,
        message:
          'The file ends in the middle; it may have been cut off on its way. The 30 rows before are read. Fetch it again.',
      },
    ])
  })

  it('in the middle of its binary data gives the whole rows', () => {
    const text = new TextDecoder().decode(fixture('binary2.vot'))
    const cut = text.replace(/([A-Za-z0-9+/=\s]{100})[A-Za-z0-9+/=\s]*<\/STREAM>/, '$1</STREAM>')
    const read = readVotable(cut)
    expect(read.rowCount).toBeLessThan(3)
    expect(read.problems[0].message).toContain('end in the middle of a row')
  })

  it.each([
    ['bad_float.vot', 3, "'n/a' in the column p_lens is not a float; it is taken as missing."],
    ['null_text.vot', 3, "'null' in the column p_lens is not a float; it is taken as missing."],
    [
      'bad_datatype.vot',
      3,
      "The column ra has the datatype 'float64', which VOTable does not know; it is read as text.",
    ],
    ['latin1.vot', 3, 'Some characters are none of the encoding that the file declares'],
    ['too_many_cells.vot', 2, 'This row has 17 cells where the table has 16 columns; it is left out.'],
    ['unescaped_amp.vot', 0, 'The file is not well-formed XML here'],
    ['scs_error.vot', 0, 'The service that wrote this file reports an error'],
    ['scs_overflow.vot', 2, 'rows are missing'],
  ])('%s keeps %i rows and says what is wrong', (name, rowCount, message) => {
    const read = readFixture(name)
    expect(read.rowCount).toBe(rowCount)
    expect(read.columns.every((column) => column.length === rowCount)).toBe(true)
    expect(read.problems[0].message).toContain(message)
  })

  it.each([
    ['ra,dec\n1,2\n', 'This is not a VOTable'],
    ['', 'This is not a VOTable'],
    ['<html><body>Not found</body></html>', 'This is not a VOTable'],
    [new Uint8Array([0x1f, 0x8b, 8, 0]), 'compressed with gzip'],
    [new Uint8Array([0x50, 0x4b, 3, 4]), 'a zip archive'],
    [Buffer.from('<?xml version="1.0" encoding="klingon"?><VOTABLE/>'), 'its encoding is klingon'],
    ['<VOTABLE><RESOURCE/></VOTABLE>', 'holds no table with columns'],
    [wrap('<FIELD name="x" datatype="int"/><DATA><FITS/></DATA>'), 'keeps its rows in FITS'],
    [
      wrap('<FIELD name="x" datatype="int"/><DATA><BINARY><STREAM href="http://x.test/"/></BINARY></DATA>'),
      'in another place',
    ],
    [
      wrap('<FIELD name="x" datatype="char" arraysize="*"/><DATA><BINARY><STREAM>f////0FB</STREAM></BINARY></DATA>'),
      'row 1 claims a cell of 2147483647 bytes',
    ],
  ])('or is none is refused with a sentence: %#', (input, message) => {
    const read = readVotable(input)
    expect(read.rowCount).toBe(0)
    expect(read.problems.map((problem) => problem.message).join(' ')).toContain(message)
  })

  // XML 1.0 section 4.4 lets entities hold entities; a document of a kilobyte can stand for gigabytes.
  it('by entities of its own is not expanded', () => {
    const bomb = `<!DOCTYPE VOTABLE [<!ENTITY a "aaaaaaaaaa"><!ENTITY b "&a;&a;&a;&a;">]>${table('<TR><TD>&b;</TD><TD>1</TD></TR>').split('\n').slice(1).join('\n')}`
    const read = readVotable(bomb)
    expect(read.isComplete).toBe(false)
    expect(read.columns.flatMap((column) => [...column])).toEqual([])
  })

  it('a thousand times over has a list of problems that ends', () => {
    const rows = '<TR><TD>a</TD></TR>\n'.repeat(1000)
    const { problems, rowCount } = readVotable(table(rows))
    expect(rowCount).toBe(0)
    expect(problems.length).toBe(101)
    expect(problems[100].message).toBe('900 more problems of this kind are not listed.')
  })
})

const meta: VotableMeta = { tableName: 'round', description: 'Round trip', infos: [] }
type Row = CellValue[]
const column = (datatype: Datatype, place: number): Column<Row> => ({
  name: `c${place}`,
  datatype,
  description: datatype,
  ...((datatype === 'short' || datatype === 'int') && { nullValue: -32768 }),
  value: (row) => row[place],
})
const columns = (['unicodeChar', 'double', 'int', 'boolean', 'short', 'float', 'char'] as const).map(column)
const nullable = <T>(values: fc.Arbitrary<T>) => fc.option(values, { nil: null })
const anyRow = fc.tuple(
  // Text that XML can hold; '' reads as missing, which it is in a table.
  nullable(
    fc
      .string({ unit: 'grapheme', minLength: 1 })
      .filter((text) => /^[\t\n\r\x20-\ud7ff\ue000-\ufffd\u{10000}-\u{10ffff}]+$/u.test(text)),
  ),
  nullable(fc.double({ noNaN: true })),
  nullable(fc.integer({ min: -30000, max: 2 ** 31 - 1 })),
  nullable(fc.boolean()),
  nullable(fc.integer({ min: -30000, max: 32767 })),
  nullable(fc.float({ noNaN: true })),
  nullable(fc.string({ unit: fc.constantFrom(...'abc <>&"\'=+-09'), minLength: 1 })),
)

describe('what we write', () => {
  it.each([
    ['TABLEDATA', votableDocument],
    ['BINARY2', votableBinary2Document],
  ] as const)('in %s comes back, whatever it holds', async (_, write) => {
    await fc.assert(
      fc.asyncProperty(fc.array(anyRow, { maxLength: 20 }), async (rows) => {
        const read = await readVotable(write(meta, columns, rows))
        expect(read.problems).toEqual([])
        expect(rowsOf(read)).toEqual(rows)
      }),
    )
  })

  it('in BINARY2 is the same from rows that come one by one, over many pieces', async () => {
    const rows: Row[] = Array.from({ length: 5000 }, (_, k) => [
      `n${k}θ`,
      k / 7,
      k,
      k % 2 === 0,
      k % 100,
      0.5,
      'x'.repeat(k % 50) || null,
    ])
    async function* slowly() {
      yield* rows
    }
    const read = await readVotable(votableBinary2Document(meta, columns, slowly()))
    expect(read.rowCount).toBe(5000)
    expect(rowsOf(read)).toEqual(rows)
  })

  it('in BINARY2 is refused where it does not fit, as in TABLEDATA', async () => {
    const gather = async () => {
      for await (const _ of votableBinary2Document(meta, columns, [['a', 1, 1.5, true, 1, 1, 'a']])) void _
    }
    await expect(gather()).rejects.toThrow('Column c2, row 1: 1.5 is not a whole number.')
  })
})
