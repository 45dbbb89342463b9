import { afterEach, beforeEach, expect, it, describe } from 'vitest'
import { addCalibrationCandidate, addJudgedCandidate, giveGrades } from '@/tests/_support/judged-candidate'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { addKnown, measure } from './_found'
import { candidateTable } from './candidate-table'
import { catalogueTable } from './catalogue-table'
import type { ColumnCondition, TableColumnName, TableFilter, TableInput } from './table-input'

let scenario: Scenario
beforeEach(async () => {
  scenario = await makeScenario({ gradesWanted: 4, leastGrades: 3 })
})
afterEach(() => scenario.db.destroy())

const AS_IT_COMES: TableInput = { filter: {}, order: 'id', descending: false, page: 0, pageSize: 100 }

/** Their names, whatever they are called to the reader. */
async function named(rows: readonly { id: number }[]): Promise<string[]> {
  const known = new Map(
    (await scenario.db.selectFrom('candidate').select(['id', 'name']).execute()).map((row) => [row.id, row.name]),
  )
  return rows.map(({ id }) => known.get(id)!)
}

async function candidates(viewer: Scenario['lead'], input: Partial<TableInput>) {
  const table = await candidateTable(scenario.db, await scenario.permit(viewer, 'read'), { ...AS_IT_COMES, ...input })
  expect(table.count).toBe(table.rows.length)
  return named(table.rows)
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
      await measure(scenario, id, 1.2)
      await addKnown(scenario, id, { keepsOut: false })
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
      await measure(scenario, first, 2)
      await measure(scenario, second, 1)
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
