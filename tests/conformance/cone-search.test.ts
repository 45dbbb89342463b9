/**
 * Answers of the cone search before the judges of the trade: stilts votlint with its check of UCDs, the VOTable 1.4 schema, astropy, and
 * IVOA's schemas of VOSI for what the service says of itself. The running server is asked by pyvo and stilts in tests/e2e.
 */
import { afterAll, beforeAll, expect, it } from 'vitest'
import { findReleaseById, type ReleaseRow } from '@/db/queries/releases'
import { coneDocument, coneErrorDocument } from '@/lib/work/releases/cone-document'
import { readConeQuery } from '@/lib/work/releases/cone-query'
import { describeService } from '@/lib/work/releases/describe-service'
import { VOSI_DOCUMENTS } from '@/lib/work/releases/vosi-documents'
import { addReleaseAt } from '@/tests/_support/released-entries'
import { makeScenario, type Scenario } from '@/tests/_support/scenario'
import { removeDocumentsAfterwards, writeDocument } from './_table-sample'
import { askAstropy, describeConformance, validateAgainstSchema, votlint, xsdFaults } from './_table-tools'

let scenario: Scenario
let release: ReleaseRow

removeDocumentsAfterwards()

async function* whole(text: string): AsyncGenerator<string, void, void> {
  yield text
}

beforeAll(async () => {
  scenario = await makeScenario()
  await scenario.db
    .updateTable('campaign')
    .set({ survey: 'Saltmarsh "Wide" & <Deep>, 深' })
    .where('id', '=', scenario.campaign.id)
    .execute()
  const places = Array.from({ length: 30 }, (_, k) => [150 + k / 300, 2 - k / 500] as const)
  release = (await findReleaseById(
    scenario.db,
    await addReleaseAt(scenario.db, scenario.campaign, scenario.lead.id, places, { title: 'Lenses <1> & "more"' }),
  ))!
})
afterAll(() => scenario.db.destroy())

const answer = async (name: string, query: string) =>
  writeDocument(
    name,
    await coneDocument({
      ...{ db: scenario.db, release, siteUrl: 'https://ringside.example', token: null },
      query: readConeQuery(new URLSearchParams(query)),
    }),
  )

interface Read {
  valid: boolean
  report: string
  infos: [string, string][]
  fields: { name: string; ucd: string | null; datatype: string; ref: string | null; unitFault: string | null }[]
  rows: unknown[][]
}

const AROUND = 'RA=150&DEC=2&SR=0.5'

describeConformance('an answer of the cone search', () => {
  it.each([
    ['VERB=1', 30],
    ['VERB=2', 30],
    ['VERB=3', 30],
    ['VERB=3&RESPONSEFORMAT=votable/b2', 30],
    ['MAXREC=7', 7],
    ['MAXREC=0', 0],
  ])('leaves votlint and the schema nothing to say with %s', async (more, rows) => {
    const path = await answer(`cone-${more.replace(/\W/g, '-')}.vot`, `${AROUND}&${more}`)
    expect(votlint(path)).toBe('')
    expect(validateAgainstSchema(path)).toMatchObject({ succeeded: true })
    const read = askAstropy<Read>('read-votable.py', path)
    // astropy knows the UCDs of the second kind only; the standard asks for these three of the first.
    expect(read.report.match(/[WE]\d\d: [^\n]*'/g)).toEqual([
      "W06: Invalid UCD 'ID_MAIN': Unknown word 'ID_MAIN'",
      expect.stringContaining("W06: Invalid UCD 'POS_EQ_RA_MAIN'"),
      expect.stringContaining("W06: Invalid UCD 'POS_EQ_DEC_MAIN'"),
    ])
    expect(read.rows).toHaveLength(rows)
    expect(read.fields.map(({ unitFault }) => unitFault)).toEqual(read.fields.map(() => null))
  })

  // Simple Cone Search 1.03, section 2, item 2.
  it('has exactly one FIELD each of the three UCDs that the standard asks for, of its types, whatever VERB', async () => {
    const counts: number[] = []
    for (const verb of [1, 2, 3]) {
      const { fields } = askAstropy<Read>('read-votable.py', await answer(`verb-${verb}.vot`, `${AROUND}&VERB=${verb}`))
      const of = (ucd: string) => fields.filter((field) => field.ucd === ucd)
      expect(of('ID_MAIN')).toMatchObject([{ name: 'entry', datatype: 'char' }])
      expect(of('POS_EQ_RA_MAIN')).toMatchObject([{ name: 'ra', datatype: 'double', ref: 'sys_icrs' }])
      expect(of('POS_EQ_DEC_MAIN')).toMatchObject([{ name: 'dec', datatype: 'double', ref: 'sys_icrs' }])
      expect(fields.map(({ name }) => name)).toContain('basis')
      expect(fields.filter(({ ucd }) => ucd === null)).toEqual([])
      counts.push(fields.length)
    }
    expect(counts[0]).toBeLessThan(counts[1])
    expect(counts[1]).toBeLessThan(counts[2])
  })

  it('has columns and no rows for SR=0, and for a cone where nothing is', async () => {
    for (const query of ['RA=150&DEC=2&SR=0', 'RA=10&DEC=-80&SR=1']) {
      const path = await answer(`none-${query.length}.vot`, query)
      expect(votlint(path)).toBe('')
      const read = askAstropy<Read>('read-votable.py', path)
      expect(read.rows).toEqual([])
      expect(read.fields.length).toBeGreaterThan(5)
      expect(read.infos).not.toContainEqual(['QUERY_STATUS', 'OVERFLOW'])
    }
  })

  it('tells behind the table that entries were left out, and only then', async () => {
    const few = await answer('few.vot', `${AROUND}&MAXREC=29`)
    expect(askAstropy<Read>('read-votable.py', few).infos).toContainEqual(['QUERY_STATUS', 'OVERFLOW'])
    const all = await answer('all.vot', `${AROUND}&MAXREC=30`)
    expect(askAstropy<Read>('read-votable.py', all).infos).not.toContainEqual(['QUERY_STATUS', 'OVERFLOW'])
  })

  it('is an error document that votlint and the schema take, with the sentence as it is', async () => {
    const path = await writeDocument('error.vot', whole(coneErrorDocument('RA=<"1"> & more is not a number.')))
    expect(votlint(path)).toBe('')
    expect(validateAgainstSchema(path)).toMatchObject({ succeeded: true })
  })
})

describeConformance('what the cone search says of itself', () => {
  it.each(VOSI_DOCUMENTS)("%s is valid against IVOA's schemas", async (document) => {
    for (const key of [null, 'a&b']) {
      const at = { address: 'https://ringside.example/r/north/1/cone', key, upSince: '2026-01-01T00:00:00.000Z' }
      const path = await writeDocument(
        `${document}-${key === null}.xml`,
        whole(await describeService(scenario.db, release, document, at)),
      )
      expect(xsdFaults(path)).toBe('')
    }
  })

  it('is found wanting by the same judge where an element is out of place', async () => {
    const at = { address: 'https://ringside.example/r/north/1/cone', key: null, upSince: '2026-01-01T00:00:00.000Z' }
    const text = await describeService(scenario.db, release, 'capabilities', at)
    const path = await writeDocument('wrong.xml', whole(text.replace('<maxSR>180</maxSR>', '<maxSR>all</maxSR>')))
    expect(xsdFaults(path)).toMatch(/maxSR|all/)
  })
})
