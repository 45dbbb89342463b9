/**
 * The catalogue of a campaign, exported by the use case from a real database, before the judges of the trade: stilts votlint,
 * xmllint with the IVOA schema 1.4, astropy, papaparse and Python's csv module. Everything that a person can type into a
 * name, a remark, a tag or a reason is in it.
 */
import { readFile } from 'node:fs/promises'
import Papa from 'papaparse'
import { afterAll, beforeAll, expect, it } from 'vitest'
import type { CellValue } from '@/lib/science/formats/columns'
import { catalogueEntries, type CatalogueEntry } from '@/lib/work/catalogue/catalogue-entries'
import { exportCatalogue } from '@/lib/work/catalogue/export-catalogue'
import { CAUTION, EXPORT_COLUMNS } from '@/lib/work/catalogue/export-columns'
import { addJudgedCandidate } from '@/tests/_support/judged-candidate'
import { makeScenario, type Scenario } from '@/tests/_support/scenario'
import { removeDocumentsAfterwards, writeDocument } from './_table-sample'
import { askAstropy, describeConformance, validateAgainstSchema, votlint } from './_table-tools'

const NASTY = [
  '=HYPERLINK("http://example.test"), as a formula',
  '+1', // other ways in which a spreadsheet's formula begins
  '-2+3',
  '@SUM(A1)',
  'a "quoted" word, a comma; a semicolon',
  'two\nlines, then\n\na third after a blank one',
  'one\r\ntwo\rthree',
  '<b>bold</b> & &amp; ]]> <!-- x -->',
  "'single' and \\ backslash\tand a tab",
  'θ_E ≈ 1.2″, naïve é, e\u0301, 引力透镜, 😀',
  '#comment',
  'null',
]

interface AstropyVotable {
  valid: boolean
  report: string
  coordinateSystems: [string, string][]
  infos: [string, string][]
  description: string
  fields: Record<'name' | 'datatype' | 'unit' | 'unitFault' | 'ucd' | 'ref' | 'description', string | null>[]
  rows: CellValue[][]
}

let scenario: Scenario
let votable = ''
let csv = ''
const entries: CatalogueEntry[] = []
let read: AstropyVotable

removeDocumentsAfterwards()

async function exported(format: 'csv' | 'vot'): Promise<string> {
  const permit = await scenario.permit(scenario.lead, 'read')
  return writeDocument(`export.${format}`, (await exportCatalogue(scenario.db, permit, format)).text)
}

/** Confirms with a reason in a lead's own words. */
async function rule(candidateId: number, reason: string): Promise<void> {
  const ruling = await scenario.db
    .insertInto('ruling')
    .values({
      candidate_id: candidateId,
      person_id: scenario.lead.id,
      outcome: 'confirmed',
      grade: 'B',
      reason,
      created_at: '2026-03-01T00:00:00.000Z',
    })
    .returning('id')
    .executeTakeFirstOrThrow()
  await scenario.db.updateTable('candidate').set({ ruling_id: ruling.id }).where('id', '=', candidateId).execute()
}

beforeAll(async () => {
  scenario = await makeScenario({ gradesWanted: 4, leastGrades: 3 })
  const { db, campaign } = scenario
  await db
    .updateTable('campaign')
    .set({ name: 'North "field" <1> & ]]>', survey: 'Saltmarsh Wide Survey, 深' })
    .where('id', '=', campaign.id)
    .execute()
  for (const [index, text] of NASTY.entries()) {
    const id = await addJudgedCandidate(scenario, `${text} ${index}`, {
      grades: index % 2 ? 'AAB' : 'ABAU',
      position: { raDeg: 359.99999999999994 - index / 7, decDeg: -1e-13 - index * 7.3 },
      remark: text,
      tags: [text, 'arc'],
    })
    await rule(id, text)
  }
  const bare = await addJudgedCandidate(scenario, 'bare', { grades: 'AAA' })
  await db.updateTable('candidate').set({ ra_deg: null, dec_deg: null }).where('id', '=', bare).execute()
  await db
    .updateTable('candidate')
    .set({ lens_redshift: 0.222, source_redshift: 2.379 })
    .where('id', '=', bare)
    .execute()
  await addJudgedCandidate(scenario, 'not a lens', { grades: 'NNN' })
  const permit = await scenario.permit(scenario.lead, 'read')
  for await (const page of catalogueEntries(db, permit)) entries.push(...page)
  votable = await exported('vot')
  csv = await exported('csv')
  read = askAstropy<AstropyVotable>('read-votable.py', votable)
})
afterAll(() => scenario.db.destroy())

const valuesOf = (entry: CatalogueEntry) => EXPORT_COLUMNS.map((column) => column.value(entry))
const isText = (index: number) => /char/i.test(EXPORT_COLUMNS[index].datatype)

/** Columns in which every nasty text arrives whole, by what stands around it. */
const holds = (text: string, index: number, row: CellValue[]) => {
  const cell = (name: string) => row[EXPORT_COLUMNS.findIndex((column) => column.name === name)]
  expect(cell('name')).toBe(`${text} ${index}`)
  expect(cell('reason')).toBe(text)
  // Lines after the first stand indented, so that none passes for another person's.
  expect(cell('remarks')).toContain(`G02: ${text.replaceAll(/\r\n?|\n/g, '\n  ')}`)
  expect(cell('tags')).toContain(text)
}

describeConformance('an exported catalogue as VOTable', () => {
  it('leaves votlint nothing to say and is valid against the schema', () => {
    expect(votlint(votable)).toBe('')
    expect(validateAgainstSchema(votable)).toMatchObject({ succeeded: true })
  })

  it('is valid for astropy, in names, UCDs, units and the ICRS system', () => {
    expect(read.valid, read.report).toBe(true)
    expect(read.fields.map((field) => field.unitFault)).toEqual(EXPORT_COLUMNS.map(() => null))
    expect(read.fields.map(({ name, unit, ucd, datatype }) => ({ name, unit, ucd, datatype }))).toEqual(
      EXPORT_COLUMNS.map(({ name, unit = null, ucd, datatype }) => ({ name, unit, ucd, datatype })),
    )
    expect(read.coordinateSystems).toEqual([['sys_icrs', 'ICRS']])
    expect(read.fields.filter((field) => field.ref === 'sys_icrs').map((field) => field.name)).toEqual(['ra', 'dec'])
  })

  it('says in the file itself that a visual grade is not a spectroscopic confirmation', () => {
    expect(read.description).toContain(CAUTION)
    expect(read.description).toContain('North "field" <1> & ]]>')
    expect(read.infos).toContainEqual(['caution', CAUTION])
    expect(read.infos).toContainEqual(['survey', 'Saltmarsh Wide Survey, 深'])
  })

  it('gives astropy every value to the last bit and every text to the last character', () => {
    const expected = entries.map((entry) =>
      valuesOf(entry).map((value, index) => (isText(index) ? (value ?? '') : value)),
    )
    expect(read.rows).toEqual(expected)
    for (const [index, text] of NASTY.entries()) holds(text, index, read.rows[index])
  })
})

describeConformance('an exported catalogue as CSV', () => {
  const typed = (text: string, index: number): CellValue => (text === '' ? null : isText(index) ? text : Number(text))

  it('gives papaparse every value and text', async () => {
    const { data, errors } = Papa.parse<string[]>(await readFile(csv, 'utf8'), {
      newline: '\r\n',
      skipEmptyLines: true,
    })
    expect(errors).toEqual([])
    expect(data[0]).toEqual(EXPORT_COLUMNS.map((column) => column.name))
    expect(data.slice(1).map((row) => row.map(typed))).toEqual(entries.map(valuesOf))
    for (const [index, text] of NASTY.entries()) holds(text, index, data[index + 1])
  })

  it("gives Python's csv module the same, and astropy every number to the last bit", () => {
    const { columns, rows, records } = askAstropy<{ columns: string[]; rows: CellValue[][]; records: string[][] }>(
      'read-csv.py',
      csv,
    )
    expect(records.slice(1).map((row) => row.map(typed))).toEqual(entries.map(valuesOf))
    expect(columns).toEqual(EXPORT_COLUMNS.map((column) => column.name))
    const numbers = (row: CellValue[]) => row.filter((_, index) => !isText(index))
    expect(rows.map(numbers)).toEqual(entries.map(valuesOf).map(numbers))
  })

  it('says of every row what it rests on', async () => {
    const { data } = Papa.parse<Record<string, string>>(await readFile(csv, 'utf8'), {
      header: true,
      skipEmptyLines: true,
      newline: '\r\n',
    })
    expect(new Set(data.map((row) => row.basis))).toEqual(new Set(['visual grade, not a spectroscopic confirmation']))
    expect(data.map((row) => row.name)).not.toContain('not a lens')
  })
})
