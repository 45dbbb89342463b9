/** Our BINARY2 before the judges of the trade: stilts votlint, xmllint with the IVOA schema 1.4, and astropy reading every value. */
import { beforeAll, expect, it } from 'vitest'
import {
  SAMPLE_COLUMNS,
  SAMPLE_LENSES,
  removeDocumentsAfterwards,
  writeDocument,
} from '@/tests/conformance/_table-sample'
import { askAstropy, describeConformance, validateAgainstSchema, votlint } from '@/tests/conformance/_table-tools'
import type { VotableMeta } from '@/lib/science/formats/write-votable'
import { votableBinary2Document } from '@/lib/science/formats/write-votable-binary2'

const meta: VotableMeta = { tableName: 'catalogue', description: 'Invented lenses', infos: [] }

removeDocumentsAfterwards()

describeConformance('a catalogue as VOTable in BINARY2', () => {
  let path = ''

  beforeAll(async () => {
    path = await writeDocument('binary2.vot', votableBinary2Document(meta, SAMPLE_COLUMNS, SAMPLE_LENSES))
  })

  it('leaves votlint nothing to say', () => {
    expect(votlint(path)).toBe('')
  })

  it('is valid against the VOTable 1.4 schema', () => {
    expect(validateAgainstSchema(path)).toMatchObject({ succeeded: true })
  })

  it('gives astropy every value to the last bit and every text to the last character', () => {
    const { rows, valid, report } = askAstropy<{ rows: unknown[][]; valid: boolean; report: string }>(
      'read-votable.py',
      path,
    )
    expect(valid, report).toBe(true)
    const expected = SAMPLE_LENSES.map((lens) =>
      SAMPLE_COLUMNS.map((column) => {
        const value = column.value(lens)
        const isText = column.datatype === 'char' || column.datatype === 'unicodeChar'
        return isText ? (value ?? '') : value
      }),
    )
    expect(rows).toEqual(expected)
  })

  it('stands before the judges without rows', async () => {
    const empty = await writeDocument('empty2.vot', votableBinary2Document(meta, SAMPLE_COLUMNS, []))
    expect(votlint(empty)).toBe('')
    expect(validateAgainstSchema(empty)).toMatchObject({ succeeded: true })
  })
})
