import { sql } from 'kysely'
import { afterEach, beforeEach, expect, it, describe } from 'vitest'
import { separationArcsec, coneHalfWidthDeg } from '@/lib/science/sky/separation'
import { addCalibrationCandidate, addJudgedCandidate, giveGrades } from '@/tests/_support/judged-candidate'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { candidateTable } from './candidate-table'
import { catalogueTable } from './catalogue-table'
import type { ColumnCondition, TableColumnName, TableFilter, TableInput } from './table-input'

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

async function shownTo(viewer: Scenario['lead']): Promise<string[]> {
  const rows = await scenario.db
    .selectFrom('judgement_shown')
    .innerJoin('candidate', 'candidate.id', 'judgement_shown.candidate_id')
    .select('candidate.name')
    .where('judgement_shown.person_id', '=', viewer.id)
    .orderBy('candidate.id')
    .execute()
  return rows.map(({ name }) => name)
}

async function measure(candidateId: number, radiusArcsec: number): Promise<void> {
  const { campaign, graders } = scenario
  await sql`insert into measurement
      (uid, campaign_id, candidate_id, person_id, event, kind, view, fitted, einstein_radius_arcsec, error_arcsec, cosmology, at)
    values (${`measured-${candidateId}`}, ${campaign.id}, ${candidateId}, ${graders[1].id}, 'measured', 'circle', 'colour', '{}',
      ${radiusArcsec}, 0.1, '{}', '2026-01-01T00:00:00.000Z')`.execute(scenario.db)
}

/** The object of a list at the very place of the candidate. */
async function addKnown(candidateId: number, list: { keepsOut: boolean; decision?: 'different' }): Promise<void> {
  const { db, campaign, lead } = scenario
  const at = '2026-01-01T00:00:00.000Z'
  const { id } = await db
    .insertInto('reference_list')
    .values({
      campaign_id: campaign.id,
      name: `List for ${candidateId}`,
      source: 'a paper',
      list_date: '2026-01-01',
      file_name: 'list.csv',
      format: 'csv',
      sha256: String(candidateId).padStart(64, '0'),
      bytes: 1,
      mapping: '{}',
      radius_arcsec: 2,
      keeps_out_of_new: list.keepsOut ? 1 : 0,
      state: 'ready',
      reason: null,
      uploaded_by: lead.id,
      uploaded_at: at,
      state_since: at,
    } as never)
    .returning('id')
    .executeTakeFirstOrThrow()
  await db
    .insertInto('reference_object')
    .values({ list_id: id, row_number: 1, name: 'RS 1', ra_deg: 1, dec_deg: 1, redshift: null, more: null })
    .execute()
  await db
    .insertInto('object_match')
    .values({ candidate_id: candidateId, list_id: id, row_number: 1, separation_arcsec: 0.5 })
    .execute()
  if (!list.decision) return
  await db
    .insertInto('match_decision')
    .values({
      campaign_id: campaign.id,
      candidate_id: candidateId,
      other_id: null,
      list_id: id,
      row_number: 1,
      decision: list.decision,
      reason: 'another galaxy',
      person_id: lead.id,
      created_at: at,
    })
    .execute()
}

describe('what a grader has not judged', () => {
  const WITHHELD: [TableColumnName, ColumnCondition][] = [
    ['mean', from(0)],
    ['mean', { kind: 'missing' }],
    ['mean', { kind: 'present' }],
    ['spread', from(0)],
    ['grades', from(0)],
    ['grades', from(2)],
    ['designation', holds('SWS')],
    ['designation', { kind: 'missing' }],
    ['tags', holds('arc')],
    ['remark', holds('counter')],
    ['decided', among('verdict')],
    ['entered', from('2000')],
    ['entered', { kind: 'missing' }],
    ['zlens', from(0)],
    ['zlens', { kind: 'missing' }],
    ['known', among('known')],
    ['known', among('new')],
    ['known', among('known', 'new')],
    ['einstein', from(0)],
    ['einstein', { kind: 'missing' }],
  ]

  it.each(WITHHELD)('is not found by %s %j, which finds the like for a lead', async (column, condition) => {
    const [grader] = scenario.graders
    const judged = { remark: 'a counter-image', tags: ['arc'] }
    const own = await addJudgedCandidate(scenario, 'own', { grades: 'AAA ', ...judged })
    const other = await addJudgedCandidate(scenario, 'other', { grades: ' AAA', ...judged })
    for (const id of [own, other]) {
      await measure(id, 1.2)
      await addKnown(id, { keepsOut: false })
    }
    const missing = condition.kind === 'missing'
    await scenario.db
      .updateTable('candidate')
      .set({ lens_redshift: missing ? null : 0.4 })
      .execute()
    const found = await candidates(grader, by(column, condition))
    expect(found).not.toContain('other')
    const forLead = await candidates(scenario.lead, by(column, condition))
    expect(forLead.includes('own')).toBe(forLead.includes('other'))
    if (found.length > 0) expect(forLead).toEqual(['own', 'other'])
  })

  it.each(['mean', 'spread', 'grades', 'designation', 'decided', 'entered', 'state', 'einstein', 'zlens'] as const)(
    'has no place in the order by %s that tells of it',
    async (order) => {
      const first = await addJudgedCandidate(scenario, 'first', { grades: ' NNN' })
      const second = await addJudgedCandidate(scenario, 'second', { grades: ' AAA' })
      await addJudgedCandidate(scenario, 'third', { grades: ' ANA' })
      await measure(first, 2)
      await measure(second, 1)
      await set('first', { lens_redshift: 0.9 })
      await set('second', { lens_redshift: 0.1 })
      const inOrder = ['first', 'second', 'third']
      expect(await candidates(scenario.graders[0], { order })).toEqual(inOrder)
      expect(await candidates(scenario.graders[0], { order, descending: true })).toEqual(inOrder.toReversed())
    },
  )

  it('is not found by two filters together, nor beside those that are not graded', async () => {
    await addJudgedCandidate(scenario, 'other', { grades: ' AAA' })
    const [grader] = scenario.graders
    const mean = by('mean', from(2)).filter
    expect(await candidates(grader, { filter: { ...mean, withheld: true } })).toEqual([])
    expect(await candidates(grader, { filter: { withheld: true } })).toEqual(['other'])
    expect(await candidates(grader, { filter: { ...mean, states: ['confirmed'] } })).toEqual([])
  })

  it('is withheld again from who is asked for another look', async () => {
    const id = await addJudgedCandidate(scenario, 'own', { grades: 'AAA ' })
    const [grader] = scenario.graders
    expect(await candidates(grader, by('mean', from(2)))).toEqual(['own'])
    await scenario.db
      .insertInto('asked_look')
      .values({
        campaign_id: scenario.campaign.id,
        candidate_id: id,
        person_id: grader.id,
        asked_by: scenario.lead.id,
        note: null,
        asked_at: '2026-03-01T00:00:00.000Z',
        grade_id: null,
        withdrawn_at: null,
      })
      .execute()
    expect(await candidates(grader, by('mean', from(2)))).toEqual([])
    expect(await catalogue(grader, by('mean', from(2)))).toEqual([])
  })

  it('is not in their catalogue, whatever they filter and sort by', async () => {
    await addJudgedCandidate(scenario, 'own', { grades: 'AAA ' })
    await addJudgedCandidate(scenario, 'other', { grades: ' AAB' })
    for (const order of ['mean', 'class', 'grades', 'entered', 'designation', 'einstein'] as const) {
      expect(await catalogue(scenario.graders[0], { order })).toEqual(['own'])
    }
    for (const asked of [by('mean', from(0)), by('class', among('A', 'B')), by('name', holds('o'))]) {
      expect(await catalogue(scenario.graders[0], asked)).toEqual(['own'])
    }
  })
})

describe('a calibration stamp, to who has judged it', () => {
  it('is found and sorted like an open candidate that nobody else has graded', async () => {
    const [grader] = scenario.graders
    const stamp = await addCalibrationCandidate(scenario, 'stamp')
    await giveGrades(scenario, stamp, { grades: 'BAAA', tags: ['ring'], remark: 'a ring' })
    await addImagedCandidate(scenario.db, scenario.campaign, 'open').then((id) =>
      giveGrades(scenario, id, { grades: 'B', tags: ['ring'], remark: 'a ring' }),
    )
    await addJudgedCandidate(scenario, 'decided', { grades: 'AAA ' })
    const alike = async (asked: Partial<TableInput>) => {
      const found = (await candidates(grader, asked)).filter((name) => name !== 'decided')
      expect([[], ['stamp', 'open'], ['open', 'stamp']]).toContainEqual(found)
    }
    for (const [column, condition] of [
      ['grades', from(2)],
      ['grades', from(1)],
      ['tags', holds('ring')],
      ['tags', holds('[')],
      ['tags', holds('"')],
      ['tags', { kind: 'missing' }],
      ['tags', { kind: 'present' }],
      ['remark', holds('ring')],
      ['mean', from(0)],
      ['mean', { kind: 'missing' }],
      ['designation', { kind: 'missing' }],
      ['decided', { kind: 'missing' }],
      ['known', among('new')],
      ['einstein', { kind: 'missing' }],
    ] as [TableColumnName, ColumnCondition][]) {
      await alike(by(column, condition))
    }
    expect(await candidates(grader, by('grades', from(1)))).toEqual(['stamp', 'open', 'decided'])
    for (const order of ['grades', 'mean', 'state', 'designation'] as const) {
      const names = await candidates(grader, { order })
      expect(Math.abs(names.indexOf('stamp') - names.indexOf('open'))).toBe(1)
    }
  })

  it('is told by no filter on what others wrote of it', async () => {
    const [grader] = scenario.graders
    const stamp = await addCalibrationCandidate(scenario, 'stamp')
    await giveGrades(scenario, stamp, { grades: 'B' })
    await giveGrades(scenario, stamp, { grades: ' A', tags: ['ring'], remark: 'a ring' })
    expect(await candidates(grader, by('tags', holds('ring')))).toEqual([])
    expect(await candidates(grader, by('remark', holds('ring')))).toEqual([])
    expect(await candidates(scenario.lead, by('remark', holds('ring')))).toEqual(['stamp'])
  })

  it('is in no list of a viewer', async () => {
    await addCalibrationCandidate(scenario, 'stamp')
    for (const asked of [{}, by('mean', { kind: 'missing' }), by('grades', from(0)), { order: 'ra' as const }]) {
      expect(await candidates(scenario.reader, asked)).toEqual([])
    }
    expect(await candidates(scenario.reader, by('calibration', among('calibration')))).toEqual([])
  })
})

describe('what a filter tells a grader', () => {
  it('counts as shown, of all their candidates among which it chooses and of which there is something to tell', async () => {
    const [grader] = scenario.graders
    await addJudgedCandidate(scenario, 'confirmed one', { grades: 'AAA ' })
    await addJudgedCandidate(scenario, 'set aside one', { grades: 'NNN ' })
    await addJudgedCandidate(scenario, 'elsewhere', { grades: 'NNN ', position: { raDeg: 10, decDeg: 10 } })
    await addJudgedCandidate(scenario, 'not judged', { grades: ' NNN' })
    const alone = await addImagedCandidate(scenario.db, scenario.campaign, 'open one')
    await giveGrades(scenario, alone, { grades: 'B' })
    const near: TableFilter['columns'] = [{ column: 'ra', condition: { kind: 'turn', from: 150, to: 151 } }]
    const mean = { column: 'mean', condition: from(2) } as const
    expect(await candidates(grader, { filter: { columns: [...near, mean] } })).toEqual(['confirmed one'])
    expect(await shownTo(grader)).toEqual(['confirmed one', 'set aside one'])
  })

  it('is nothing as long as it asks for places and names only', async () => {
    await addJudgedCandidate(scenario, 'own', { grades: 'AAA ' })
    await candidates(scenario.graders[0], by('name', holds('nothing like it')))
    expect(await shownTo(scenario.graders[0])).toEqual([])
  })
})

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
    await measure(one, 1.5)
    await addKnown(one, { keepsOut: true })
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
    await addKnown(one, { keepsOut: true, decision: 'different' })
    await addKnown(two, { keepsOut: false })
    expect(await catalogue(scenario.lead, by('known', among('known')))).toEqual(['known, and new'])
    expect(await catalogue(scenario.lead, by('known', among('new')))).toEqual(['told apart', 'known, and new'])
  })

  it('sort measured candidates by radius, the rest behind them, on every page', async () => {
    const ids: number[] = []
    for (const name of ['a', 'b', 'c', 'd']) ids.push(await addJudgedCandidate(scenario, name, { grades: 'AAA' }))
    await measure(ids[1], 2)
    await measure(ids[3], 1)
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
