// @vitest-environment jsdom
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { ICRS_ID, UTC_ID, type CellValue, type Column, type Datatype } from '@/lib/science/formats/columns'
import { votableDocument, type VotableMeta } from '@/lib/science/formats/write-votable'

const parser = new DOMParser()
const meta: VotableMeta = { tableName: 'catalogue', description: 'Lenses & <more>', infos: [] }

/** A table of one column with one value in each row. */
function column(datatype: Datatype, more: Partial<Column<CellValue>> = {}): Column<CellValue> {
  return { name: 'x', datatype, description: 'A value', value: (value) => value, ...more }
}

async function textOf(columns: Column<CellValue>[], rows: Iterable<CellValue>, about = meta) {
  let text = ''
  for await (const chunk of votableDocument(about, columns, rows)) text += chunk
  return text
}

async function parse(columns: Column<CellValue>[], rows: Iterable<CellValue>, about = meta) {
  return parser.parseFromString(await textOf(columns, rows, about), 'text/xml')
}

async function cellsOf(columns: Column<CellValue>[], rows: Iterable<CellValue>) {
  const document = await parse(columns, rows)
  return [...document.querySelectorAll('TD')].map((cell) => cell.textContent)
}

describe('votableDocument', () => {
  it('is a VOTable 1.4 in the namespace of the schema, with its rows in a results resource', async () => {
    const document = await parse([column('double')], [1, 2])
    const root = document.documentElement
    expect(root.getAttribute('version')).toBe('1.4')
    expect(root.namespaceURI).toBe('http://www.ivoa.net/xml/VOTable/v1.3')
    expect(root.getAttribute('xsi:schemaLocation')).toBe(
      'http://www.ivoa.net/xml/VOTable/v1.3 http://www.ivoa.net/xml/VOTable/VOTable-1.4.xsd',
    )
    expect(document.querySelector('RESOURCE')?.getAttribute('type')).toBe('results')
    expect(document.querySelector('INFO[name=QUERY_STATUS]')?.getAttribute('value')).toBe('OK')
    expect(document.querySelector('TABLE > DESCRIPTION')?.textContent).toBe('Lenses & <more>')
    expect(document.querySelectorAll('TR')).toHaveLength(2)
  })

  it('ties positions to one ICRS system and times to UTC, and writes neither system without need', async () => {
    const document = await parse(
      [
        column('double', { name: 'ra', ucd: 'pos.eq.ra;meta.main' }),
        column('double', { name: 'dec', ucd: 'pos.eq.dec;meta.main' }),
        column('char', { name: 'when', xtype: 'timestamp' }),
      ],
      [],
    )
    expect([...document.querySelectorAll('FIELD')].map((field) => field.getAttribute('ref'))).toEqual([
      ICRS_ID,
      ICRS_ID,
      UTC_ID,
    ])
    expect(document.querySelector(`COOSYS[ID=${ICRS_ID}]`)?.getAttribute('system')).toBe('ICRS')
    expect(document.querySelector(`TIMESYS[ID=${UTC_ID}]`)?.getAttribute('timescale')).toBe('UTC')
    expect(await textOf([column('double', { ucd: 'pos.eq.racy' })], [])).not.toMatch(/COOSYS|TIMESYS/)
  })

  it('keeps a query status that was given, and infos and parameters exactly', async () => {
    const about: VotableMeta = {
      ...meta,
      infos: [
        { name: 'QUERY_STATUS', value: 'OVERFLOW' },
        { name: 'note', value: 'two\r\n"lines"\t& <more>' },
      ],
      params: [{ name: 'release', datatype: 'unicodeChar', value: 'θ 1', ucd: 'meta.version', description: 'Release' }],
    }
    const document = await parse([column('double')], [], about)
    expect([...document.querySelectorAll('INFO')].map((info) => info.getAttribute('value'))).toEqual([
      'OVERFLOW',
      'two\r\n"lines"\t& <more>',
    ])
    expect(document.querySelector('PARAM')?.getAttribute('value')).toBe('θ 1')
    expect(document.querySelector('PARAM')?.getAttribute('arraysize')).toBe('*')
  })

  it('yields chunks of tens of kilobytes and takes rows only as they are wanted', async () => {
    let taken = 0
    function* rows() {
      for (; taken < 100_000; taken++) yield taken
    }
    const chunks = votableDocument(meta, [column('int')], rows())
    const first = await chunks.next()
    expect((first.value as string).length).toBeGreaterThan(30_000)
    expect((first.value as string).length).toBeLessThan(40_000)
    expect(taken).toBeLessThan(3_000)
    await chunks.return(undefined)
  })
})

describe('text in a VOTable', () => {
  it('comes back as it was: quotes, markup, every line break, what ends CDATA, a leading =', async () => {
    const texts = ['=1+1', 'say "x" & <b>\'y\'</b>', 'a]]>b', 'one\ntwo\r\nthree\rfour\tfive', 'θ é 😀', ' blanks ']
    expect(await cellsOf([column('unicodeChar')], texts)).toEqual(texts)
  })

  // XML 1.0, production 2: Char ::= #x9 | #xA | #xD | [#x20-#xD7FF] | [#xE000-#xFFFD] | [#x10000-#x10FFFF]
  it('has a replacement character for each that XML cannot hold, also for half a surrogate pair', async () => {
    const texts = [
      'a\u0000b\u000bc\u001fd',
      'x\ud800y',
      '\udc00\ud83d',
      '\ufffe\uffff',
      '\u007f\u0085\u2028\ud83d\ude00',
    ]
    expect(await cellsOf([column('unicodeChar')], texts)).toEqual([
      'a\ufffdb\ufffdc\ufffdd',
      'x\ufffdy',
      '\ufffd\ufffd',
      '\ufffd\ufffd',
      '\u007f\u0085\u2028\ud83d\ude00',
    ])
  })

  it('is the same for a parser, whatever the text, in cells and in attributes', async () => {
    // Any UTF-16, half surrogate pairs included.
    const anyText = fc
      .array(fc.oneof(fc.integer({ min: 0, max: 0xffff }), fc.integer({ min: 0, max: 0x7f })), { maxLength: 20 })
      .map((units) => String.fromCharCode(...units))
    const legal = (text: string) =>
      [...text]
        .map((c) => (/^[\t\n\r\u0020-\ud7ff\ue000-\ufffd\u{10000}-\u{10ffff}]$/u.test(c) ? c : '\ufffd'))
        .join('')
    await fc.assert(
      fc.asyncProperty(fc.array(anyText, { minLength: 1, maxLength: 5 }), anyText, async (texts, note) => {
        const about = { ...meta, description: note, infos: [{ name: 'note', value: note }] }
        const document = await parse([column('unicodeChar')], texts, about)
        expect([...document.querySelectorAll('TD')].map((cell) => cell.textContent)).toEqual(texts.map(legal))
        expect(document.querySelector('INFO[name=note]')?.getAttribute('value')).toBe(legal(note))
        expect(document.querySelector('TABLE > DESCRIPTION')?.textContent).toBe(legal(note))
      }),
    )
  })
})

describe('values in a VOTable', () => {
  it('are the shortest text that reads back as the same double, with the standard words for what is no number', async () => {
    expect(await cellsOf([column('double')], [0.1 + 0.2, 5e-324, 1e300, -0, NaN, Infinity, -Infinity, null])).toEqual([
      '0.30000000000000004',
      '5e-324',
      '1e+300',
      '-0',
      'NaN',
      '+Inf',
      '-Inf',
      '',
    ])
  })

  it('are missing as an empty cell, as the declared null of an integer column, as ? for a boolean', async () => {
    expect(await cellsOf([column('int')], [7, null])).toEqual(['7', ''])
    expect(await cellsOf([column('short', { nullValue: -1 })], [7, null])).toEqual(['7', '-1'])
    expect(await textOf([column('short', { nullValue: -1 })], [])).toContain('<VALUES null="-1"/>')
    expect(await cellsOf([column('boolean')], [true, false, null])).toEqual(['true', 'false', '?'])
    expect(await cellsOf([column('char')], ['a', null])).toEqual(['a', ''])
  })

  it.each([
    ['char', 'θ', 'Column x, row 2: char holds ASCII only; declare the column unicodeChar.'],
    ['char', '\u0000', 'Column x, row 2: char holds ASCII only; declare the column unicodeChar.'],
    ['double', '12', "Column x, row 2: '12' is not a number."],
    ['int', 1.5, 'Column x, row 2: 1.5 is not a whole number.'],
    ['int', NaN, 'Column x, row 2: NaN is not a whole number.'],
    ['short', 32768, 'Column x, row 2: 32768 does not fit short.'],
    ['int', -2147483649, 'Column x, row 2: -2147483649 does not fit int.'],
    ['long', 2 ** 53, 'Column x, row 2: 9007199254740992 does not fit long.'],
    ['float', 1e39, 'Column x, row 2: 1e+39 does not fit float.'],
    ['boolean', 'yes', "Column x, row 2: 'yes' is not a boolean."],
  ] as [Datatype, CellValue, string][])(
    'are refused where they do not fit %s: %j',
    async (datatype, value, message) => {
      await expect(textOf([column(datatype)], [null, value])).rejects.toThrow(new RangeError(message))
    },
  )

  it('are refused where they would be taken for missing', async () => {
    await expect(textOf([column('int', { nullValue: -1 })], [-1])).rejects.toThrow('-1 stands for a missing value here')
  })
})
