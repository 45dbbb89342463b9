/**
 * Our VOTables before the judges of the trade: stilts votlint (cells, IDs, schema), xmllint with the IVOA schema 1.4, and
 * astropy (UCDs, units, and every value read back). No single one sees every fault; see fixtures/votable/README.md.
 */
import { beforeAll, expect, it } from 'vitest'
import {
  SAMPLE_COLUMNS,
  SAMPLE_LENSES,
  removeDocumentsAfterwards,
  writeDocument,
} from '@/tests/conformance/_table-sample'
import { askAstropy, describeConformance, validateAgainstSchema, votlint } from '@/tests/conformance/_table-tools'
import { votableDocument, type VotableMeta } from '@/lib/science/formats/write-votable'

interface AstropyVotable {
  valid: boolean
  report: string
  fault?: string
  version: string
  coordinateSystems: [string, string][]
  infos: [string, string][]
  params: [string, string][]
  description: string
  fields: Record<'name' | 'datatype' | 'unit' | 'unitFault' | 'ucd' | 'xtype' | 'ref' | 'description', string | null>[]
  rows: (string | number | boolean | null)[][]
}

const meta: VotableMeta = {
  tableName: 'catalogue',
  description: 'Candidates confirmed by eye. A visual grade is not a spectroscopic confirmation; "A" & <B> are grades.',
  infos: [{ name: 'survey', value: 'Saltmarsh Wide Survey, "SWS" <north> & south' }],
  params: [{ name: 'release', datatype: 'char', ucd: 'meta.version', value: '1.0.0', description: 'Release' }],
}

removeDocumentsAfterwards()

describeConformance('the checks themselves see', () => {
  const faulty = (name: string) => `fixtures/votable/${name}.vot`

  it.each(['too-few-cells', 'field-after-data', 'dup-id', 'control-char'])('the fault %s: votlint speaks', (name) => {
    expect(votlint(faulty(name))).not.toBe('')
  })

  it.each(['field-after-data', 'dup-id', 'control-char'])('the fault %s: the schema refuses', (name) => {
    expect(validateAgainstSchema(faulty(name)).succeeded).toBe(false)
  })

  it.each(['non-ascii-in-char', 'ucd-order'])('the fault %s: astropy finds it', (name) => {
    expect(askAstropy<AstropyVotable>('read-votable.py', faulty(name)).valid).toBe(false)
  })

  it('the unit degrees, which is not a VOUnit', () => {
    const { fields } = askAstropy<AstropyVotable>('read-votable.py', faulty('bad-unit-degrees'))
    expect(fields.filter((field) => field.unitFault !== null)).not.toEqual([])
  })
})

describeConformance('a catalogue as VOTable', () => {
  let path = ''
  let read: AstropyVotable

  beforeAll(async () => {
    path = await writeDocument('catalogue.vot', votableDocument(meta, SAMPLE_COLUMNS, SAMPLE_LENSES))
    read = askAstropy<AstropyVotable>('read-votable.py', path)
  })

  it('leaves votlint nothing to say', () => {
    expect(votlint(path)).toBe('')
  })

  it('is valid against the VOTable 1.4 schema', () => {
    expect(validateAgainstSchema(path)).toMatchObject({ succeeded: true })
  })

  it('is valid for astropy, and its units are VOUnits', () => {
    expect(read.fault).toBeUndefined()
    expect(read.valid, read.report).toBe(true)
    expect(read.version).toBe('1.4')
    expect(read.fields.map((field) => field.unitFault)).toEqual(SAMPLE_COLUMNS.map(() => null))
  })

  it('gives astropy every name, datatype, unit, UCD and description', () => {
    const said = read.fields.map(({ name, datatype, ucd, description }) => ({ name, datatype, ucd, description }))
    expect(said).toEqual(
      SAMPLE_COLUMNS.map(({ name, datatype, ucd, description }) => ({ name, datatype, ucd, description })),
    )
    // astropy spells km/s in the other way that VOUnits allows.
    const spelt = (unit: string | undefined) => (unit === 'km/s' ? 'km.s**-1' : (unit ?? null))
    expect(read.fields.map((field) => field.unit)).toEqual(SAMPLE_COLUMNS.map((column) => spelt(column.unit)))
  })

  it('says that its positions are ICRS', () => {
    expect(read.coordinateSystems).toEqual([['sys_icrs', 'ICRS']])
    const positions = read.fields.filter((field) => field.ucd?.startsWith('pos.eq.'))
    expect(positions.map((field) => field.ref)).toEqual(['sys_icrs', 'sys_icrs'])
  })

  it('gives astropy the descriptions, infos and parameters of the table', () => {
    expect(read.description).toBe(meta.description)
    expect(read.infos).toEqual([
      ['QUERY_STATUS', 'OK'],
      ['survey', 'Saltmarsh Wide Survey, "SWS" <north> & south'],
    ])
    expect(read.params).toEqual([['release', '1.0.0']])
  })

  it('gives astropy every value to the last bit and every text to the last character', () => {
    const expected = SAMPLE_LENSES.map((lens) =>
      SAMPLE_COLUMNS.map((column) => {
        const value = column.value(lens)
        const isText = column.datatype === 'char' || column.datatype === 'unicodeChar'
        return isText ? (value ?? '') : value
      }),
    )
    expect(read.rows).toEqual(expected)
  })

  it('keeps CR LF inside a remark, which a parser would otherwise turn into LF', async () => {
    const lens = { ...SAMPLE_LENSES[0], remark: 'one\r\ntwo\rthree' }
    const other = await writeDocument('line-ends.vot', votableDocument(meta, SAMPLE_COLUMNS, [lens]))
    expect(askAstropy<AstropyVotable>('read-votable.py', other).rows[0].at(-1)).toBe('one\r\ntwo\rthree')
  })

  it('stands before all judges without rows, and with characters that XML cannot hold', async () => {
    const empty = await writeDocument('empty.vot', votableDocument(meta, SAMPLE_COLUMNS, []))
    const bad = { ...SAMPLE_LENSES[0], remark: 'a\u0000b\u000bc\ud800d\uffffe' }
    const replaced = await writeDocument('replaced.vot', votableDocument(meta, SAMPLE_COLUMNS, [bad]))
    for (const file of [empty, replaced]) {
      expect(votlint(file)).toBe('')
      expect(validateAgainstSchema(file)).toMatchObject({ succeeded: true })
      expect(askAstropy<AstropyVotable>('read-votable.py', file).valid).toBe(true)
    }
    expect(askAstropy<AstropyVotable>('read-votable.py', replaced).rows[0].at(-1)).toBe('a\ufffdb\ufffdc\ufffdd\ufffde')
  })

  it('writes what is no number in the words that votlint knows', async () => {
    const odd = [NaN, Infinity, -Infinity].map((theta) => ({ ...SAMPLE_LENSES[0], theta }))
    const file = await writeDocument('odd.vot', votableDocument(meta, SAMPLE_COLUMNS, odd))
    expect(votlint(file)).toBe('')
    const column = SAMPLE_COLUMNS.findIndex(({ name }) => name === 'theta_e')
    const values = askAstropy<AstropyVotable>('read-votable.py', file).rows.map((row) => row[column])
    expect(values).toEqual([null, 'inf', '-inf'])
  })
})
