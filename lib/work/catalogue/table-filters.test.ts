import { afterEach, beforeEach, expect, it, describe } from 'vitest'
import { separationArcsec, coneHalfWidthDeg } from '@/lib/science/sky/separation'
import { addJudgedCandidate } from '@/tests/_support/judged-candidate'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { addKnown, measure } from './_found'
import { candidateTable } from './candidate-table'
import { catalogueTable } from './catalogue-table'
import type { ColumnCondition, TableColumnName, TableInput } from './table-input'

let scenario: Scenario
beforeEach(async () => {
  scenario = await makeScenario({ gradesWanted: 4, leastGrades: 3 })
})
afterEach(() => scenario.db.destroy())

const AS_IT_COMES: TableInput = { filter: {}, order: 'id', descending: false, page: 0, pageSize: 100 }

async function candidates(viewer: Scenario['lead'], input: Partial<TableInput>) {
  const table = await candidateTable(scenario.db, await scenario.permit(viewer, 'read'), { ...AS_IT_COMES, ...input })
  expect(table.count).toBe(table.rows.length)
  return table.rows.map(({ name }) => name)
}

async function catalogue(viewer: Scenario['lead'], input: Partial<TableInput>) {
  const table = await catalogueTable(scenario.db, await scenario.permit(viewer, 'read'), { ...AS_IT_COMES, ...input })
  expect(table.count).toBe(table.rows.length)
  return table.rows.map(({ name }) => name)
}

const by = (column: TableColumnName, condition: ColumnCondition): Pick<TableInput, 'filter'> => ({
  filter: { columns: [{ column, condition }] },
})
const from = (least: number | string): ColumnCondition => ({ kind: 'range', least, most: null })
const holds = (...parts: string[]): ColumnCondition => ({ kind: 'contains', parts })
const among = (...values: string[]): ColumnCondition => ({ kind: 'among', values })

const set = (name: string, values: object) =>
  scenario.db.updateTable('candidate').set(values).where('name', '=', name).execute()

describe('filters of everybody who may see all', () => {
  it('find by every column what the table shows there', async () => {
    const one = await addJudgedCandidate(scenario, 'one', {
      grades: 'AAB ',
      tags: ['arc', 'ring'],
      remark: 'a Faint arc',
    })
    await addJudgedCandidate(scenario, 'two', { grades: 'NNNN' })
    await addImagedCandidate(scenario.db, scenario.campaign, 'three')
    await set('one', { lens_redshift: 0.5, source_redshift: 2 })
    await measure(scenario, one, 1.5)
    await addKnown(scenario, one, { keepsOut: true })
    const cases: [TableColumnName, ColumnCondition, string[]][] = [
      ['mean', from(2), ['one']],
      ['spread', { kind: 'range', least: null, most: 0.1 }, ['two']],
      ['mean', { kind: 'missing' }, ['three']],
      ['grades', from(4), ['two']],
      ['grades', { kind: 'range', least: null, most: 0 }, ['three']],
      ['tags', holds('ring', 'arc'), ['one']],
      ['tags', holds('spiral'), []],
      ['remark', holds('faint'), ['one']],
      ['decided', among('verdict'), ['one', 'two']],
      ['entered', { kind: 'range', least: '2026-02-03', most: '2026-02-04', below: true }, ['one']],
      ['zlens', { kind: 'range', least: 0.5, most: 0.5 }, ['one']],
      ['zsource', { kind: 'missing' }, ['two', 'three']],
      ['einstein', { kind: 'range', least: 1, most: 1.5 }, ['one']],
      ['einstein', { kind: 'range', least: 1, most: 1.5, below: true }, []],
      ['einstein', { kind: 'range', least: 1.5, most: 2 }, ['one']],
      ['einstein', { kind: 'range', least: 1.5, most: 2, above: true }, []],
      ['einstein', { kind: 'missing' }, ['two', 'three']],
      ['known', among('known'), ['one']],
      ['known', among('new'), ['two', 'three']],
      ['designation', holds('SWS J'), ['one']],
    ]
    for (const viewer of [scenario.lead, scenario.reader]) {
      for (const [column, condition, expected] of cases) {
        expect([column, await candidates(viewer, by(column, condition))]).toEqual([column, expected])
      }
    }
  })

  it('take no match for known that a lead told to be another object, and no list for it that keeps nothing out of new', async () => {
    const one = await addJudgedCandidate(scenario, 'told apart', { grades: 'AAA' })
    const two = await addJudgedCandidate(scenario, 'known, and new', { grades: 'AAA' })
    await addKnown(scenario, one, { keepsOut: true, decision: 'different' })
    await addKnown(scenario, two, { keepsOut: false })
    expect(await catalogue(scenario.lead, by('known', among('known')))).toEqual(['known, and new'])
    expect(await catalogue(scenario.lead, by('known', among('new')))).toEqual(['told apart', 'known, and new'])
  })

  it('sort measured candidates by radius, the rest behind them, on every page', async () => {
    const ids: number[] = []
    for (const name of ['a', 'b', 'c', 'd']) ids.push(await addJudgedCandidate(scenario, name, { grades: 'AAA' }))
    await measure(scenario, ids[1], 2)
    await measure(scenario, ids[3], 1)
    const pages = async (descending: boolean) => {
      const names: string[] = []
      for (const page of [0, 1, 2]) {
        const table = await catalogueTable(scenario.db, await scenario.permit(scenario.lead, 'read'), {
          ...AS_IT_COMES,
          ...{ order: 'einstein', descending, page, pageSize: 3 },
        })
        expect(table.count).toBe(4)
        names.push(...table.rows.map(({ name }) => name))
      }
      return names
    }
    expect(await pages(false)).toEqual(['d', 'b', 'a', 'c'])
    expect(await pages(true)).toEqual(['b', 'd', 'c', 'a'])
  })

  it('count numbers in names: SWS9 comes before SWS10, zeros before them notwithstanding', async () => {
    for (const name of ['SWS10', 'sws 2', 'SWS9', 'SWS011', 'SWS9b']) {
      await addImagedCandidate(scenario.db, scenario.campaign, name)
    }
    const order = ['sws 2', 'SWS9', 'SWS9b', 'SWS10', 'SWS011']
    expect(await candidates(scenario.lead, { order: 'name' })).toEqual(order)
    expect(await candidates(scenario.lead, { order: 'name', descending: true })).toEqual(order.toReversed())
  })
})

describe('a region of the sky', () => {
  const PLACES: [string, number, number][] = [
    ['just west of 0', 359.9999, 10],
    ['just east of 0', 0.0001, 10],
    ['by the north pole', 10, 89.999],
    ['across the north pole', 190, 89.999],
    ['south', 200, -89.9995],
    ['elsewhere', 100, 10],
  ]
  beforeEach(async () => {
    for (const [name, raDeg, decDeg] of PLACES) {
      await addImagedCandidate(scenario.db, scenario.campaign, name, { raDeg, decDeg })
    }
  })

  it.each([
    [0, 10, 5],
    [359.99995, 10, 1],
    [0.0001, 10, 0.001],
    [45, 90, 10],
    [300, 89.999, 8],
    [200, -90, 2],
    [200, -90, 1.7],
    [100, 10, 3600 * 180],
    [100, 10, 3600 * 91],
    [0, 0, 3600 * 10.0001],
  ])('round %d %d within %d arcsec holds what lies there by the great circle', async (raDeg, decDeg, radiusArcsec) => {
    const centre = { raDeg, decDeg }
    const expected = PLACES.filter(
      ([, ra, dec]) => separationArcsec(centre, { raDeg: ra, decDeg: dec }) <= radiusArcsec,
    ).map(([name]) => name)
    const cone = { ...centre, radiusArcsec, halfWidthDeg: coneHalfWidthDeg(decDeg, radiusArcsec) }
    expect(await candidates(scenario.reader, { filter: { cone } })).toEqual(expected)
  })

  it('between right ascensions goes eastward, across 0 where it begins west of it', async () => {
    const turn = (west: number, east: number) =>
      candidates(scenario.lead, by('ra', { kind: 'turn', from: west, to: east }))
    expect(await turn(359, 1)).toEqual(['just west of 0', 'just east of 0'])
    expect(await turn(90, 110)).toEqual(['elsewhere'])
    expect(await turn(180, 10)).toHaveLength(5)
  })
})
