import { afterEach, beforeEach, expect, it } from 'vitest'
import { candidateNumber } from '@/lib/work/campaigns/candidate-number'
import { addCalibrationCandidate, addJudgedCandidate } from '@/tests/_support/judged-candidate'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { candidateTable } from './candidate-table'
import type { TableInput } from './table-input'

let scenario: Scenario
beforeEach(async () => {
  scenario = await makeScenario({ gradesWanted: 4, leastGrades: 3 })
})
afterEach(() => scenario.db.destroy())

async function tableFor(viewer: Scenario['lead'], input: Partial<TableInput> = {}) {
  const permit = await scenario.permit(viewer, 'read')
  return candidateTable(scenario.db, permit, {
    filter: {},
    order: 'id',
    descending: false,
    page: 0,
    pageSize: 100,
    ...input,
  })
}

const named = (part: string) => ({
  columns: [{ column: 'name' as const, condition: { kind: 'contains' as const, parts: [part] } }],
})
const CALIBRATION = {
  columns: [{ column: 'calibration' as const, condition: { kind: 'among' as const, values: ['calibration'] } }],
}
const names = (table: Awaited<ReturnType<typeof tableFor>>) => table.rows.map((row) => row.name)

it('sorts by mean with what has none last, both ways', async () => {
  await addJudgedCandidate(scenario, 'middle', { grades: 'BBB' })
  await addImagedCandidate(scenario.db, scenario.campaign, 'none')
  await addJudgedCandidate(scenario, 'best', { grades: 'AAA' })
  await addJudgedCandidate(scenario, 'worst', { grades: 'NNN' })
  expect(names(await tableFor(scenario.lead, { order: 'mean', descending: true }))).toEqual([
    'best',
    'middle',
    'worst',
    'none',
  ])
  expect(names(await tableFor(scenario.lead, { order: 'mean' }))).toEqual(['worst', 'middle', 'best', 'none'])
})

it('does not let the order by mean or state give away what a grader has not judged', async () => {
  const grader = scenario.graders[0]
  const worst = await addJudgedCandidate(scenario, 'withheld worst', { grades: ' NNN' })
  const best = await addJudgedCandidate(scenario, 'withheld best', { grades: ' AAA' })
  await addJudgedCandidate(scenario, 'own', { grades: 'BBB ' })
  for (const order of ['mean', 'spread', 'state'] as const) {
    const told = names(await tableFor(grader, { order }))
    expect(told).toEqual(['own', candidateNumber(worst), candidateNumber(best)])
  }
})

it('finds what the first pass did not send on, for leads', async () => {
  for (const name of ['waits', 'dropped', 'stamp']) await addImagedCandidate(scenario.db, scenario.campaign, name)
  const set = (name: string, values: { first_pass?: 'dropped'; truth?: 'lens' }) =>
    scenario.db.updateTable('candidate').set(values).where('name', '=', name).execute()
  await set('dropped', { first_pass: 'dropped' })
  await set('stamp', { first_pass: 'dropped', truth: 'lens' })
  expect(names(await tableFor(scenario.lead, { filter: { notSentOn: true } }))).toEqual(['dropped'])
  expect(await tableFor(scenario.graders[0], { filter: { notSentOn: true } })).toMatchObject({ count: 3 })
})

it('finds by part of the name, taking % and _ for themselves', async () => {
  for (const name of ['SWS 10%', 'SWS 100', 'sws_1']) await addImagedCandidate(scenario.db, scenario.campaign, name)
  expect(names(await tableFor(scenario.lead, { filter: named('sws') }))).toHaveLength(3)
  expect(names(await tableFor(scenario.lead, { filter: named('10%') }))).toEqual(['SWS 10%'])
  expect(names(await tableFor(scenario.lead, { filter: named('_') }))).toEqual(['sws_1'])
})

it('counts what passes the filter and all there is, and pages through it', async () => {
  for (const name of ['a1', 'a2', 'a3', 'b1']) await addImagedCandidate(scenario.db, scenario.campaign, name)
  const second = await tableFor(scenario.lead, { filter: named('a'), page: 1, pageSize: 2 })
  expect(second).toMatchObject({ count: 3, all: 4 })
  expect(names(second)).toEqual(['a3'])
})

it('keeps grades and state of what a grader has not judged out of the row, and finds those by what is withheld', async () => {
  await addJudgedCandidate(scenario, 'own', { grades: 'AAA ' })
  const other = await addJudgedCandidate(scenario, 'other', { grades: ' AAA' })
  const { rows } = await tableFor(scenario.graders[0])
  expect(rows.map(({ state, votes }) => [state, votes])).toEqual([
    ['confirmed', { A: 3, B: 0, C: 0, N: 0, U: 0 }],
    [null, null],
  ])
  expect(names(await tableFor(scenario.graders[0], { filter: { withheld: true } }))).toEqual([candidateNumber(other)])
  expect(names(await tableFor(scenario.graders[0], { filter: { states: ['confirmed'] } }))).toEqual(['own'])
  expect((await tableFor(scenario.graders[0], { filter: { states: ['confirmed'] } })).count).toBe(1)
})

it('sorts by score and filters calibration for leads, and passes both over for others', async () => {
  const low = await addImagedCandidate(scenario.db, scenario.campaign, 'low')
  const high = await addImagedCandidate(scenario.db, scenario.campaign, 'high')
  const stamp = await addCalibrationCandidate(scenario, 'calibration')
  await scenario.db.updateTable('candidate').set({ score: 0.9 }).where('name', '=', 'high').execute()
  await scenario.db.updateTable('candidate').set({ score: 0.1 }).where('name', '=', 'low').execute()
  const byScore = { order: 'score', descending: true } as const
  expect(names(await tableFor(scenario.lead, byScore))).toEqual(['high', 'low', 'calibration'])
  expect(names(await tableFor(scenario.graders[0], { ...byScore, descending: false }))).toEqual([
    candidateNumber(low),
    candidateNumber(high),
    candidateNumber(stamp),
  ])
  expect(names(await tableFor(scenario.lead, { filter: CALIBRATION }))).toEqual(['calibration'])
  expect(names(await tableFor(scenario.graders[0], { filter: CALIBRATION }))).toHaveLength(3)
})

it('gives each row its colour stamp by the newest recipe', async () => {
  const id = await addImagedCandidate(scenario.db, scenario.campaign, 'pictured')
  const recipe = await scenario.db.selectFrom('recipe').select('id').executeTakeFirstOrThrow()
  for (const [view, digit] of [
    ['deep', 'a'],
    ['colour', 'b'],
  ]) {
    await scenario.db
      .insertInto('stamp')
      .values({
        campaign_id: scenario.campaign.id,
        candidate_id: id,
        recipe_id: recipe.id,
        view,
        sha256: digit.repeat(64),
        bytes: 1,
        width: 1,
        height: 1,
        note: null,
      })
      .execute()
  }
  const { rows } = await tableFor(scenario.lead)
  expect(rows[0].thumbnail).toBe(`/api/campaigns/${scenario.campaign.slug}/stamps/${'b'.repeat(64)}`)
})

it('is closed to strangers', async () => {
  await expect(tableFor(scenario.stranger)).rejects.toMatchObject({ status: 404 })
})
