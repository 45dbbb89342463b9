import { sql } from 'kysely'
import { afterEach, beforeEach, expect, it } from 'vitest'
import { applyStates } from '@/lib/work/consensus/apply-state'
import { addCalibrationCandidate, addJudgedCandidate, giveGrades } from '@/tests/_support/judged-candidate'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { catalogueTable } from './catalogue-table'
import { exportCatalogue } from './export-catalogue'

let scenario: Scenario
beforeEach(async () => {
  scenario = await makeScenario({ gradesWanted: 4, leastGrades: 3 })
})
afterEach(() => scenario.db.destroy())

const tableFor = async (viewer: Scenario['lead']) => catalogueTable(scenario.db, await scenario.permit(viewer, 'read'))

/** Confirms by a ruling of the lead. */
async function rule(candidateId: number, grade: 'A' | 'B' | 'C' | null): Promise<void> {
  await scenario.db.transaction().execute(async (transaction) => {
    const ruling = await transaction
      .insertInto('ruling')
      .values({
        candidate_id: candidateId,
        person_id: scenario.lead.id,
        outcome: 'confirmed',
        grade,
        reason: 'The arc has a counter-image.',
        created_at: '2026-03-01T00:00:00.000Z',
      })
      .returning('id')
      .executeTakeFirstOrThrow()
    await transaction.updateTable('candidate').set({ ruling_id: ruling.id }).where('id', '=', candidateId).execute()
    const outcome = { candidateId, state: 'confirmed', restsOn: { cause: 'ruling', id: ruling.id } } as const
    await applyStates(transaction, scenario.campaign, [outcome], '2026-03-01T00:00:00.000Z')
  })
}

it('holds the confirmed candidates and no others, with their numbers', async () => {
  await addJudgedCandidate(scenario, 'lens', { grades: 'AAB', position: { raDeg: 3.144, decDeg: -1.396 } })
  await addJudgedCandidate(scenario, 'not a lens', { grades: 'NNN' })
  await addJudgedCandidate(scenario, 'split', { grades: 'AANN' })
  const { rows, ownOnly } = await tableFor(scenario.lead)
  expect(ownOnly).toBe(false)
  expect(rows).toHaveLength(1)
  expect(rows[0]).toMatchObject({
    name: 'lens',
    // 3.144 deg = 00h12m34.56s, -1.396 deg = -01d23m45.6s, by hand.
    designation: 'SWS J001234.56-012345.6',
    gradeClass: 'A',
    votes: { A: 2, B: 1, C: 0, N: 0, U: 0 },
    decidedBy: 'verdict',
    enteredAt: '2026-02-03T04:05:06.000Z',
  })
  // Points 3, 3, 2: mean 8/3, population standard deviation sqrt(2)/3.
  expect(rows[0].mean).toBeCloseTo(8 / 3, 12)
  expect(rows[0].spread).toBeCloseTo(Math.SQRT2 / 3, 12)
})

it('says when a lead decided, and takes the class from the ruling where it names a grade', async () => {
  const named = await addJudgedCandidate(scenario, 'named', { grades: 'ANAN' })
  const unnamed = await addJudgedCandidate(scenario, 'unnamed', { grades: 'ANAN' })
  await rule(named, 'A')
  await rule(unnamed, null)
  const { rows } = await tableFor(scenario.lead)
  expect(rows.map(({ name, decidedBy, gradeClass }) => [name, decidedBy, gradeClass])).toEqual([
    ['named', 'ruling', 'A'],
    ['unnamed', 'ruling', 'B'],
  ])
})

it('counts a corrected grade once, as corrected', async () => {
  const id = await addJudgedCandidate(scenario, 'lens', { grades: 'AAA' })
  const first = await scenario.db
    .selectFrom('grade')
    .selectAll()
    .where('person_id', '=', scenario.graders[0].id)
    .executeTakeFirstOrThrow()
  const { id: firstId, ...values } = first
  await scenario.db
    .insertInto('grade')
    .values({ ...values, uid: 'correction', grade: 'B', replaces: firstId })
    .execute()
  const { rows } = await tableFor(scenario.lead)
  expect(rows.find((row) => row.id === id)?.votes).toEqual({ A: 2, B: 1, C: 0, N: 0, U: 0 })
})

it('shows a grader the entries they have judged, and tells neither which nor how many others there are', async () => {
  await addJudgedCandidate(scenario, 'own', { grades: 'AAA ' })
  const before = await tableFor(scenario.graders[0])
  await addJudgedCandidate(scenario, 'other', { grades: ' AAA' })
  const own = await tableFor(scenario.graders[0])
  expect(own).toEqual(before)
  expect(own.rows.map((row) => row.name)).toEqual(['own'])
  expect(own).toMatchObject({ ownOnly: true, mayExport: false })
  expect(await tableFor(scenario.reader)).toMatchObject({ ownOnly: false, mayExport: true })
})

it('is empty before anything is confirmed, and closed to strangers', async () => {
  await addImagedCandidate(scenario.db, scenario.campaign, 'open')
  expect(await tableFor(scenario.reader)).toMatchObject({ rows: [] })
  await expect(tableFor(scenario.stranger)).rejects.toMatchObject({ status: 404 })
})

it('never holds a calibration candidate, even if a damaged row called one confirmed', async () => {
  const { db } = scenario
  const id = await addCalibrationCandidate(scenario, 'calibration')
  await giveGrades(scenario, id, { grades: 'AAAA' })
  const confirm = () => db.updateTable('candidate').set({ state: 'confirmed' }).where('id', '=', id).execute()
  await expect(confirm()).rejects.toThrow(/CHECK/)
  await expect(rule(id, 'A')).rejects.toThrow('a calibration candidate is never decided')

  await sql`pragma ignore_check_constraints = on`.execute(db)
  await confirm()
  for (const viewer of [scenario.lead, scenario.graders[0], scenario.reader]) {
    expect(await tableFor(viewer)).toMatchObject({ rows: [] })
  }
  for (const format of ['csv', 'vot'] as const) {
    const { text } = await exportCatalogue(db, await scenario.permit(scenario.lead, 'read'), format)
    let whole = ''
    for await (const piece of text) whole += piece
    expect(whole).not.toContain('calibration')
  }
})
