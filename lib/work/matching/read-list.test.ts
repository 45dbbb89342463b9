import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import path from 'node:path'
import { afterAll, describe, expect, it } from 'vitest'
import type { ListMapping } from '@/db/schema/matching'
import { look } from './list-worker'
import { lookAtList, readList, type Finding } from './read-list'

const folder = mkdtempSync(path.join(tmpdir(), 'ringside-lists-'))
afterAll(() => rmSync(folder, { recursive: true, force: true }))
let files = 0

function fileOf(text: string | Uint8Array): { path: string; bytes: number } {
  const name = path.join(folder, `list-${++files}`)
  writeFileSync(name, text)
  return { path: name, bytes: text.length }
}
const lookAt = (text: string, mapping: ListMapping | null = null) => {
  const { path, bytes } = fileOf(text)
  return lookAtList(path, bytes, mapping)
}
async function readAll(text: string | Uint8Array, change: Partial<ListMapping> = {}) {
  const { path, bytes } = fileOf(text)
  const { mapping } = await lookAtList(path, bytes, null)
  const rows: [number, string, number | null, number | null, number | null, string | null][] = []
  const read = await readList({ path, mapping: { ...mapping, ...change } }, async (part) => {
    rows.push(...(JSON.parse(part) as typeof rows))
  })
  return { read, rows }
}
const sentences = (findings: Finding[]) => findings.map(({ sentence }) => sentence).join(' ')

const votableIn = (system: string, equinox: string | null) =>
  `<VOTABLE version="1.4"><RESOURCE><COOSYS ID="s" system="${system}"${equinox ? ` equinox="${equinox}"` : ''}/><TABLE>
    <FIELD name="a" ucd="pos.eq.ra;meta.main" unit="deg" ref="s" datatype="double"/>
    <FIELD name="d" ucd="pos.eq.dec;meta.main" unit="deg" ref="s" datatype="double"/>
    <DATA><TABLEDATA><TR><TD>150</TD><TD>2</TD></TR></TABLEDATA></DATA></TABLE></RESOURCE></VOTABLE>`

const GOOD = 'name,ra,dec,z,ref\nOld ring,150.25,-2.5,0.42,Heron 2019\nReed arc,359.9,12,-99,\n'

describe('a look at a list', () => {
  it('guesses the columns of a CSV and shows the first rows as they will be read', async () => {
    const { mapping, rows, findings, isWhole, looked } = await lookAt(GOOD)
    expect(mapping).toEqual({
      ra: 'ra',
      dec: 'dec',
      raUnit: 'deg',
      decUnit: 'deg',
      frame: 'ICRS',
      name: 'name',
      redshift: 'z',
      more: ['ref'],
      allTheSame: false,
    })
    expect(rows).toMatchObject([
      { row: 2, name: 'Old ring', raDeg: 150.25, decDeg: -2.5, redshift: 0.42, more: { ref: 'Heron 2019' } },
      { row: 3, name: 'Reed arc', raDeg: 359.9, decDeg: 12, redshift: null, more: {} },
    ])
    expect({ findings, isWhole, looked }).toEqual({ findings: [], isWhole: true, looked: 2 })
  })

  it('sees sexagesimal values, whatever the column is called', async () => {
    const { mapping, rows } = await lookAt('id;RA;DEC\n1;10:00:00;-01:30:00\n')
    expect([mapping.raUnit, mapping.decUnit]).toEqual(['text', 'text'])
    expect(rows[0]).toMatchObject({ raDeg: 150, decDeg: -1.5 })
  })

  it('takes a header behind comments, one inside a comment, and none at all', async () => {
    expect((await lookAt('# made by hand\nra,dec\n1,2\n')).rows).toMatchObject([{ row: 3, raDeg: 1, decDeg: 2 }])
    expect((await lookAt('# ra,dec\n1,2\n')).rows).toMatchObject([{ row: 2, raDeg: 1, decDeg: 2 }])
    const bare = await lookAt('1,2\n3,4\n')
    expect(bare.columns.map(({ name }) => name)).toEqual(['column 1', 'column 2'])
    expect(sentences(bare.findings)).toMatch(/Choose the column of the right ascension/)
  })

  it('reads a first line of values as a row and says so, but takes names with numbers in them for names', async () => {
    const { rows, columns, findings, looked } = await lookAt('Curlew Arc 0,8.35,-2.67,0.5\nCurlew Arc 1,8.4,-2.7,0.6\n')
    expect(columns.map(({ name }) => name)).toEqual(['column 1', 'column 2', 'column 3', 'column 4'])
    expect([rows[0].row, looked]).toEqual([1, 2])
    expect(sentences(findings)).toMatch(/Line 1 holds values where the names .* read as a row/)
    expect((await lookAt('K1,10:00:00,-01:30:00\nK2,10:00:01,-01:30:00\n')).looked).toBe(2)
    const named = await lookAt('name,2015,2016,ra,dec\nx,1,2,3,4\n')
    expect(named.columns[1].name).toBe('2015')
    expect(sentences(named.findings)).not.toMatch(/holds values/)
  })

  it('asks whether a few right ascensions below 24 all over the sky are hours, and takes them in as they are', async () => {
    const few = 'name,ra,dec\na,10.5,2\nb,12.1,3\nc,23.1,5\nd,2.1,60\n'
    expect((await lookAt(few)).findings).toEqual([
      { stops: false, sentence: 'All 4 right ascensions are between 0 and 24: see whether they are degrees or hours.' },
    ])
    expect((await readAll(few)).read).toMatchObject({ rows: 4 })
    expect((await lookAt('ra,dec\n10.5,2\n12.1,3\n23.1,5\n2.1,6\n')).findings).toEqual([])
    expect((await lookAt('ra,dec\n10.5,2\n12.1,3\n33.1,5\n2.1,60\n')).findings).toEqual([])
  })

  it('refuses bytes that are no text, and takes UTF-16 and a stray control character', async () => {
    const noise = fileOf(Uint8Array.from({ length: 5000 }, (_, k) => (k * 7 + 44) % 256))
    expect(await look({ ...noise, mapping: null })).toEqual({
      fault: expect.stringMatching(/no text.*neither CSV nor VOTable/),
    })
    const wide = fileOf(new Uint8Array(Buffer.from('\ufeffname,ra,dec\nx,1,2\n', 'utf16le')))
    expect(await look({ ...wide, mapping: null })).toMatchObject({ looked: 1 })
    expect((await lookAt(`name,ra,dec\nx\u0002y,1,2\n${'plain row,3,4\n'.repeat(20)}`)).looked).toBe(21)
  })

  it('shows the first rows that are at fault too, wherever they lie, and their values', async () => {
    const good = Array.from({ length: 30 }, (_, k) => `G${k},${k + 100},1`)
    const { rows, findings } = await lookAt(['name,ra,dec', ...good, 'B1,406.9,2', 'B2,10,94.5', 'B3,,', ''].join('\n'))
    expect(rows).toHaveLength(15)
    expect(rows.slice(12).map(({ row, raDeg }) => [row, raDeg])).toEqual([
      [32, null],
      [33, null],
      [34, null],
    ])
    expect(sentences(findings)).toContain('off the sky (line 32: 406.9, 2; line 33: 10, 94.5)')
  })

  it('turns galactic and FK5 positions to ICRS', async () => {
    // astropy 5.2.1: SkyCoord(l, b, unit='deg', frame='galactic').icrs and SkyCoord(10, 20, unit='deg', frame='fk5').icrs
    const { mapping, rows } = await lookAt('glon,glat\n0,0\n120.5,-33.25\n')
    expect(mapping.frame).toBe('GALACTIC')
    expect(rows[0].raDeg).toBeCloseTo(266.4049882865447, 10)
    expect(rows[0].decDeg).toBeCloseTo(-28.93617776179147, 10)
    expect(rows[1].raDeg).toBeCloseTo(10.521008296836268, 10)
    expect(rows[1].decDeg).toBeCloseTo(29.577574960352067, 10)
    const fk5 = await lookAt('ra,dec\n10,20\n', { ...mapping, ra: 'ra', dec: 'dec', frame: 'FK5' })
    expect(fk5.rows[0].raDeg).toBeCloseTo(9.999991497745736, 10)
    expect(fk5.rows[0].decDeg).toBeCloseTo(19.999998470513287, 10)
  })

  it('reads a VOTable with its units and UCDs', async () => {
    const text = `<VOTABLE version="1.4"><RESOURCE><COOSYS ID="s" system="ICRS"/><TABLE>
      <FIELD name="MAIN" ucd="meta.id;meta.main" datatype="char" arraysize="*"/>
      <FIELD name="a" ucd="pos.eq.ra;meta.main" unit="h" ref="s" datatype="double"/>
      <FIELD name="d" ucd="pos.eq.dec;meta.main" unit="deg" ref="s" datatype="double"/>
      <DATA><TABLEDATA><TR><TD>Old ring</TD><TD>10</TD><TD>-1.5</TD></TR></TABLEDATA></DATA></TABLE></RESOURCE></VOTABLE>`
    const { mapping, rows, format } = await lookAt(text)
    expect(format).toBe('votable')
    expect(mapping).toMatchObject({ ra: 'a', dec: 'd', raUnit: 'hour', name: 'MAIN' })
    expect(rows).toMatchObject([{ row: 1, name: 'Old ring', raDeg: 150, decDeg: -1.5 }])
  })

  // astropy 5.2.1: what is 150, 2 in FK4 B1950 lies 0.689 degrees from 150, 2 in ICRS.
  it.each([
    ['eq_FK4', 'B1950', /are eq_FK4, equinox B1950\. .*addskycoords -inunit deg -outunit deg fk4 icrs a d ra_icrs/],
    ['FK4', null, /fk4 icrs/],
    ['ecl_FK5', 'J2000', /ecliptic icrs/],
    ['ecl_FK4', 'B1950', /turn them to ICRS first, and choose/],
    ['supergalactic', null, /supergalactic icrs/],
    ['eq_FK5', 'J1975', /are eq_FK5, equinox J1975\. /],
    ['geo_app', null, /are geo_app\. /],
  ])('stops a list that says its positions are %s %s', async (system, equinox, expected) => {
    const text = votableIn(system, equinox)
    const { findings } = await lookAt(text)
    expect(findings).toMatchObject([{ stops: true, sentence: expect.stringMatching(expected) }])
    const { read, rows } = await readAll(text)
    expect(read).toMatchObject({ refused: [{ sentence: expect.stringMatching(expected) }] })
    expect(rows).toEqual([])
  })

  it.each([
    ['ICRS', null, 'ICRS'],
    ['eq_FK5', 'J2000', 'FK5'],
    ['FK5', '2000.0', 'FK5'],
    ['galactic', null, 'GALACTIC'],
    ['UNKNOWN', null, 'ICRS'],
  ])('takes positions in %s %s as they are', async (system, equinox, frame) => {
    const { findings, mapping } = await lookAt(votableIn(system, equinox))
    expect([findings, mapping.frame]).toEqual([[], frame])
  })

  it.each([
    ['nothing at all', '', /empty/],
    ['a gzip file', Uint8Array.of(0x1f, 0x8b, 8, 0), /compressed with gzip/],
    ['a spreadsheet', 'PK\u0003\u0004 and so on', /zip archive or a spreadsheet/],
    ['a FITS table', 'SIMPLE  =                    T', /Save its table as CSV/],
    ['one column', 'ra dec\n1 2\n', /only one column/],
    ['XML that is no VOTable', '<html><body>404</body></html>', /not a VOTable/],
  ])('refuses %s with a sentence that says what to do', async (_, text, expected) => {
    const { path, bytes } = fileOf(text)
    expect(await look({ path, bytes, mapping: null })).toMatchObject({ fault: expect.stringMatching(expected) })
  })
})

describe('reading a list', () => {
  const field = (line: (k: number) => string) => `ra,dec\n${Array.from({ length: 40 }, (_, k) => line(k)).join('\n')}\n`

  it('hands on every row with its line, those without a position too', async () => {
    const { read, rows } = await readAll('name,ra,dec\na,1,2\nb,NaN,3\n\nc,,\nd,4,5\n')
    expect(read).toMatchObject({ rows: 4, positions: 2 })
    expect(rows.map(([line, name, ra]) => [line, name, ra])).toEqual([
      [2, 'a', 1],
      [3, 'b', null],
      [5, 'c', null],
      [6, 'd', 4],
    ])
    expect('findings' in read && sentences(read.findings)).toMatch(/2 lines \(the first is line 3\) have no right asc/)
  })

  it.each([
    ['swapped columns', field((k) => `${k - 20},${150 + k}`), /columns are probably swapped\. Swap them\./],
    ['right ascension in hours', field((k) => `${k / 2},${k * 2 - 40}`), /probably hours, not degrees\. Choose hours/],
    [
      'degrees beyond their range',
      field((k) => `${k === 7 ? 400 : 100 + k},${k}`),
      /Line 9 has a position off the sky/,
    ],
    [
      'text that is no coordinate',
      field((k) => (k === 3 ? 'tbd,1' : `100,${k}`)),
      /Line 5 has a position that cannot be read/,
    ],
    ['half a list', `name,ra,dec\na,1,2\nb,3,4\nc,5`, /seems to end in the middle, at line 4.*Fetch it again/],
    [
      'half a VOTable',
      '<VOTABLE><RESOURCE><TABLE><FIELD name="ra" datatype="double"/><FIELD name="dec" datatype="double"/><DATA><TABLEDATA><TR><TD>1</TD><TD>2</TD></TR><TR><TD>3</',
      /ends in the middle.*1 rows? can be read/,
    ],
    [
      'a line with too few fields',
      'name,ra,dec\na,1,2\nb,3\nc,5,6\n',
      /One line is left out\. Line 3: this line has 2 fields/,
    ],
  ])('refuses %s, saying where', async (_, text, expected) => {
    const { read, rows } = await readAll(text)
    expect('refused' in read && sentences(read.refused)).toMatch(expected)
    expect(rows, 'nothing is handed on').toEqual([])
  })

  it('takes the rest in where a lead says so, but never a list without any position', async () => {
    const { read, rows } = await readAll('name,ra,dec\na,1,2\nb,3,4\nc,5', { allTheSame: true })
    expect(read).toMatchObject({ rows: 2, positions: 2 })
    expect(rows).toHaveLength(2)
    const none = await readAll('name,ra,dec\na,x,y\n', { allTheSame: true })
    expect('refused' in none.read && sentences(none.read.refused)).toMatch(/No row has a position/)
  })

  it('refuses columns that the file has not, and one column for both', async () => {
    const { read } = await readAll(GOOD, { ra: 'RAJ2000' })
    expect('refused' in read && sentences(read.refused)).toMatch(/no column 'RAJ2000' for the right ascension/)
    const both = await readAll(GOOD, { ra: 'dec' })
    expect('refused' in both.read && sentences(both.read.refused)).toMatch(/cannot be both/)
  })

  it('hands a long list on in parts, each after the one before was kept', async () => {
    const text = `ra,dec\n${Array.from({ length: 2500 }, (_, k) => `${k / 10},1`).join('\n')}\n`
    const { path, bytes } = fileOf(text)
    const { mapping } = await lookAtList(path, bytes, null)
    const sizes: number[] = []
    let keeping = 0
    await readList({ path, mapping }, async (part) => {
      expect(++keeping).toBe(1)
      await new Promise((resolve) => setImmediate(resolve))
      sizes.push((JSON.parse(part) as unknown[]).length)
      keeping--
    })
    expect(sizes).toEqual([1000, 1000, 500])
  })

  it('keeps no character that a VOTable cannot hold', async () => {
    const { rows } = await readAll('name,ra,dec\n"a\u0001b",1,2\n')
    expect(rows[0][1]).toBe('a b')
  })
})
