import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { findReleaseById, type ReleaseRow } from '@/db/queries/releases'
import { addReleaseAt } from '@/tests/_support/released-entries'
import { addGraded, makeReleaseScenario, publishAndMake, type ReleaseScenario } from './_release-scenario'
import { changeAccess } from './change-access'
import { publicReleases } from './newest-standing'
import { readEntryPage, readReleaseContents, readReleaseHead, readReleaseTable } from './read-release-page'
import { releaseSky } from './release-sky'
import { readTableQuery, type Asked } from './table-query'

let scenario: ReleaseScenario
let release: ReleaseRow
const NOBODY = { viewer: null, token: null }

/** 1 and 2 by the product itself, 2 an erratum of 1; 3 written into the tables. All public. */
beforeAll(async () => {
  scenario = await makeReleaseScenario({ gradesWanted: 4, leastGrades: 3 })
  const { db, campaign, lead } = scenario
  await addGraded(scenario, '100%_sure', 'AAAA', { raDeg: 150.1, decDeg: 2.2, tags: ['arc'], remark: 'One\nand two' })
  await addGraded(scenario, 'plain', 'ABBB', { raDeg: 150.2, decDeg: 2.2 })
  await publishAndMake(scenario)
  await addGraded(scenario, 'late', 'BBBB', { raDeg: 150.3, decDeg: 2.2 })
  await publishAndMake(scenario, { kind: 'erratum', corrects: '1', statement: 'One was missing.' } as never)
  const permit = await scenario.permit(lead, 'lead')
  for (const number of [1, 2]) await changeAccess(db, permit, number, { access: 'public', acronymRegistered: true })
  const places = Array.from({ length: 2500 }, (_, k) => [10 + (k % 50) / 50, -1 + Math.floor(k / 50) / 25] as const)
  await addReleaseAt(db, campaign, lead.id, places, { number: 3 })
  release = (await findReleaseById(db, 2))!
})
afterAll(() => scenario.end())

const table = async (asked: Asked, of = release) => readReleaseTable(scenario.db, of, readTableQuery(asked))
const names = async (asked: Asked) => (await table(asked)).rows.map(({ name }) => name)

describe('the table of a release', () => {
  it('is in the order of the catalogue, or in one that is asked for', async () => {
    expect(await names({})).toEqual(['100%_sure', 'plain', 'late'])
    expect(await names({ sort: '-mean' })).toEqual(['100%_sure', 'plain', 'late'])
    expect(await names({ sort: 'mean' })).toEqual(['late', 'plain', '100%_sure'])
    expect(await names({ sort: '-ra' })).toEqual(['late', 'plain', '100%_sure'])
  })

  it('has what has no value last, whichever way it is sorted', async () => {
    for (const sort of ['radius', '-radius']) expect(await names({ sort })).toHaveLength(3)
  })

  it('looks for text as it is: % and _ stand for themselves', async () => {
    expect(await names({ q: '100%_' })).toEqual(['100%_sure'])
    expect(await names({ q: '%' })).toEqual(['100%_sure'])
    expect(await names({ q: 'ARC' })).toEqual(['100%_sure'])
    expect(await names({ q: "' or 1=1 --" })).toEqual([])
  })

  it('is narrowed by class, by reference lists and by place', async () => {
    expect(await names({ class: 'A' })).toEqual(['100%_sure'])
    expect(await names({ class: 'none' })).toEqual([])
    expect(await names({ known: 'yes' })).toEqual([])
    expect(await names({ known: 'no' })).toHaveLength(3)
    expect(await names({ near: '150.2 2.2', radius: '1' })).toEqual(['plain'])
  })

  it('has pages, and says so where one is asked for that is not there', async () => {
    const third = (await findReleaseById(scenario.db, 3))!
    const last = await table({ page: '51' }, third)
    expect(last).toMatchObject({ page: 50, pages: 50, count: 2500 })
    expect(last.problems).toEqual(['There is no page 51: this is the last.'])
    expect((await table({ page: '2' }, third)).rows[0].key).toBe('SWS-51')
  })
})

describe('the page of a release', () => {
  it('has its notices, what corrects it, its rule, its counts and its changes', async () => {
    const { head } = await readReleaseHead(scenario.db, 'north-field', '1', NOBODY)
    expect(head).toMatchObject({
      ...{ number: 1, newest: 3, access: 'public', method: 'mean', corrects: null },
      notices: [{ number: 2, kind: 'erratum', statement: 'One was missing.' }],
      licence: { id: 'CC-BY-4.0', url: expect.stringContaining('creativecommons.org') },
    })
    const contents = await readReleaseContents(scenario.db, release)
    expect(contents.before).toBe(1)
    expect(contents.changes).toMatchObject([{ name: 'late', change: 'entered' }])
    expect(contents.classes).toEqual([
      { class: 'A', count: 1 },
      { class: 'B', count: 2 },
    ])
    expect(contents.files.find(({ name }) => name === 'catalogue.csv')).toMatchObject({
      about: 'the catalogue, RFC 4180',
      sha256: expect.stringMatching(/^[0-9a-f]{64}$/),
    })
  })

  it('is nowhere for a number that is none', async () => {
    for (const number of ['4', '0', '1.0', 'one', ' 1']) {
      await expect(readReleaseHead(scenario.db, 'north-field', number, NOBODY)).rejects.toMatchObject({ status: 404 })
    }
  })

  it('shows each entry on its map where they are few, and cells that hold them all where they are many', async () => {
    const few = await releaseSky(scenario.db, release.id)
    expect(few.kind === 'points' && few.points.map(({ raDeg }) => raDeg)).toEqual([150.1, 150.2, 150.3])
    const many = await releaseSky(scenario.db, 3)
    expect(many).toMatchObject({ kind: 'cells', entries: 2500 })
    expect(many.kind === 'cells' && many.cells.reduce((sum, { count }) => sum + count, 0)).toBe(2500)
  })
})

describe('the page of an entry', () => {
  it('has the entries beside it, its remarks whole, and the other releases that have it', async () => {
    const [first] = (await table({})).rows
    const page = await readEntryPage(scenario.db, release, first.key)
    expect(page.before).toBeNull()
    expect(page.after?.designation).toContain('J100048')
    expect(page.entry.remarks).toEqual(['G02', 'G03', 'G04', 'G05'].map((by) => ({ by, remark: 'One\nand two' })))
    expect(page.alsoIn).toEqual([{ number: 1, key: first.key, withdrawn: false }])
  })

  it('is nowhere for a key of another release', async () => {
    await expect(readEntryPage(scenario.db, release, 'SWS-1')).rejects.toMatchObject({ status: 404 })
  })
})

describe('the public releases of a campaign', () => {
  it('come newest first with what has become of them', async () => {
    const { releases, standing } = await publicReleases(scenario.db, 'north-field')
    expect(standing?.number).toBe(3)
    expect(releases.find((one) => one.release.number === 1)).toMatchObject({ correctedBy: [2], retractedBy: null })
    expect((await publicReleases(scenario.db, 'nowhere')).standing).toBeNull()
  })
})
