import { afterEach, beforeEach, expect, it } from 'vitest'
import { candidateNumber } from '@/lib/work/campaigns/candidate-number'
import { insertLeftOut } from '@/db/queries/left-out'
import { giveGrades } from '@/lib/work/consensus/_give-grade'
import { runConsensus } from '@/lib/work/consensus/run-consensus'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { candidateTable } from './candidate-table'
import { exportCatalogue, type ExportFormat } from './export-catalogue'

const RULE = { method: 'reliability', gradesWanted: 4, leastGrades: 2, falseConfirmed: 0.1, missedLens: 0.2 } as const

let scenario: Scenario
let ids: Record<string, number>

beforeEach(async () => {
  scenario = await makeScenario(RULE)
  ids = {}
  for (const [index, [name, letters]] of Object.entries({
    sure: 'AAAN',
    likely: 'BBA',
    not: 'NNN',
    fresh: '',
  }).entries()) {
    ids[name] = await addImagedCandidate(scenario.db, scenario.campaign, name, { raDeg: 30 + index, decDeg: 2 })
    await giveGrades(scenario.db, scenario.campaign, ids[name], scenario.graders, letters)
  }
  await run()
})
afterEach(() => scenario.db.destroy())

const run = async () => runConsensus(scenario.db, await scenario.permit(scenario.lead, 'lead'))

async function exported(format: ExportFormat): Promise<string> {
  const file = await exportCatalogue(scenario.db, await scenario.permit(scenario.reader, 'read'), format)
  let text = ''
  for await (const piece of file.text) text += piece
  return text
}

/** Of the CSV, by name of candidate; cells here hold no comma but the reason's, which is quoted and after these. */
async function column(name: string): Promise<Record<string, string>> {
  const [head, ...rows] = (await exported('csv')).split('\r\n').filter(Boolean)
  const at = head.split(',').indexOf(name)
  return Object.fromEntries(rows.map((row) => [row.split(',')[1], row.split(',')[at]]))
}

it('gives every entry of the file the probability of its verdict', async () => {
  const rows = await scenario.db
    .selectFrom('verdict')
    .innerJoin('candidate', 'candidate.verdict_id', 'verdict.id')
    .select(['candidate.name', 'verdict.probability'])
    .where('verdict.outcome', '=', 'confirmed')
    .execute()
  expect(rows.map(({ name }) => name)).toContain('sure')
  expect(await column('probability')).toEqual(
    Object.fromEntries(rows.map(({ name, probability }) => [name, String(probability)])),
  )
  const table = await exported('vot')
  expect(table).toContain('name="probability"')
  expect(table).toMatch(/by the reliability of the graders .*at most 4 looks and at least 2 grades/)
})

it('counts no grade of a person who is left out, and keeps the entry in step with its verdict', async () => {
  expect((await column('n_grades')).sure).toBe('4')
  await insertLeftOut(scenario.db, {
    campaignId: scenario.campaign.id,
    personId: scenario.graders[3].id,
    leftOut: true,
    reason: 'asleep',
    decidedBy: scenario.lead.id,
    now: '2026-02-01T00:00:00.000Z',
  })
  await run()
  expect((await column('n_grades')).sure).toBe('3')
  expect((await column('votes_n')).sure).toBe('0')
  expect((await column('mean_points')).sure).toBe('3')
})

it('sorts the table by lens probability, and not so that a grader learns what they have not judged', async () => {
  const order = async (viewer: Scenario['lead'], descending: boolean) => {
    const permit = await scenario.permit(viewer, 'read')
    const table = await candidateTable(scenario.db, permit, {
      filter: {},
      order: 'probability',
      descending,
      page: 0,
      pageSize: 10,
    })
    return table.rows.map(({ name, verdict }) => [name, verdict?.probability ?? null])
  }
  const forLead = await order(scenario.lead, true)
  expect(forLead.map(([name]) => name)).toEqual(['sure', 'likely', 'not', 'fresh'])
  expect(forLead[3][1]).toBeNull()
  // The last grader has judged 'sure' only: the others come as they would without a verdict, by id.
  expect((await order(scenario.graders[3], false)).map(([name]) => name)).toEqual([
    'sure',
    ...['likely', 'not', 'fresh'].map((name) => candidateNumber(ids[name])),
  ])
  expect((await order(scenario.graders[3], true)).slice(1).map(([, probability]) => probability)).toEqual([
    null,
    null,
    null,
  ])
})

it('tells a grader what is decided without anybody’s weight, and of what is open and of a stamp alike nothing', async () => {
  const { db, campaign, graders } = scenario
  const stamp = await addImagedCandidate(db, campaign, 'stamp')
  await db.updateTable('candidate').set({ truth: 'lens' }).where('id', '=', stamp).execute()
  await giveGrades(db, campaign, stamp, graders, 'AABB')
  const one = await addImagedCandidate(db, campaign, 'one look')
  await giveGrades(db, campaign, one, graders, 'A')
  await run()
  const rowsFor = async (viewer: Scenario['lead'], order: 'id' | 'mean' | 'probability' = 'id') => {
    const input = { filter: {}, order, descending: true, page: 0, pageSize: 20 }
    return (await candidateTable(db, await scenario.permit(viewer, 'read'), input)).rows
  }
  const named = async (viewer: Scenario['lead'], name: string) =>
    (await rowsFor(viewer)).find((row) => row.name === name)
  expect((await named(scenario.lead, 'one look'))?.verdict?.outcome).toBe('open')
  expect((await named(scenario.lead, 'not'))?.verdict?.reason).toMatch(/speaks/)
  const grader = graders[0]
  expect((await named(grader, 'not'))?.verdict).toMatchObject({
    outcome: 'set aside',
    reason: expect.stringMatching(/^Set aside: /),
  })
  expect(JSON.stringify(await rowsFor(grader))).not.toMatch(/speaks|odds/)
  const told = async (name: string) => {
    const row = await named(grader, name)
    return { state: row?.state, verdict: row?.verdict, votes: row?.votes, designation: row?.designation }
  }
  expect(await told('stamp')).toEqual(await told('one look'))
  for (const order of ['mean', 'probability'] as const) {
    const names = (await rowsFor(grader, order)).map(({ name }) => name)
    expect(names.slice(-3).sort()).toEqual([candidateNumber(ids.fresh), 'one look', 'stamp'].sort())
  }
})
