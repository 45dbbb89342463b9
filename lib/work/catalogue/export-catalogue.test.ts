import { afterEach, beforeEach, expect, it } from 'vitest'
import { addJudgedCandidate } from '@/tests/_support/judged-candidate'
import { makeScenario, type Scenario } from '@/tests/_support/scenario'
import { exportCatalogue, type ExportFormat } from './export-catalogue'
import { CAUTION } from './export-columns'

let scenario: Scenario
beforeEach(async () => {
  scenario = await makeScenario({ gradesWanted: 4, leastGrades: 3 })
})
afterEach(() => scenario.db.destroy())

async function exportFor(viewer: Scenario['lead'], format: ExportFormat) {
  const file = await exportCatalogue(scenario.db, await scenario.permit(viewer, 'read'), format)
  let text = ''
  for await (const piece of file.text) text += piece
  return { ...file, text }
}

it.each([
  ['csv', 'text/csv; charset=utf-8; header=present'],
  ['vot', 'application/x-votable+xml'],
] as const)('gives leads and viewers the %s file under a name that says what it is', async (format, contentType) => {
  await addJudgedCandidate(scenario, 'lens', { grades: 'AAA' })
  for (const viewer of [scenario.lead, scenario.reader]) {
    const file = await exportFor(viewer, format)
    expect(file.contentType).toBe(contentType)
    expect(file.fileName).toMatch(new RegExp(`^north-field-catalogue-\\d{4}-\\d\\d-\\d\\d\\.${format}$`))
    expect(file.text).toContain('SWS J')
    expect(file.text).toContain('visual grade, not a spectroscopic confirmation')
  }
  expect((await exportFor(scenario.lead, 'vot')).text).toContain(CAUTION)
})

it.each(['csv', 'vot'] as const)(
  'refuses the %s file to graders, who have still to judge, and to strangers',
  async (format) => {
    await addJudgedCandidate(scenario, 'lens', { grades: 'AAA' })
    await expect(exportFor(scenario.graders[0], format)).rejects.toMatchObject({
      status: 403,
      message: expect.stringContaining('Ask a lead or a viewer'),
    })
    await expect(exportFor(scenario.stranger, format)).rejects.toMatchObject({ status: 404 })
  },
)

it('names graders by their pseudonyms and never by their names or addresses', async () => {
  await addJudgedCandidate(scenario, 'lens', { grades: 'AAA', remark: 'arc', tags: ['arc', 'ring'] })
  const { text } = await exportFor(scenario.reader, 'csv')
  expect(text).toContain('"G02: arc\nG03: arc\nG04: arc"')
  expect(text).toContain('arc (3); ring (3)')
  for (const { name, email } of scenario.graders) {
    expect(text).not.toContain(name)
    expect(text).not.toContain(email)
  }
})

it('reads the database page by page, each row once, also when there are more rows than a page holds', async () => {
  for (let index = 0; index < 3; index++) await addJudgedCandidate(scenario, `lens ${index}`, { grades: 'AAA' })
  const source = await scenario.db.selectFrom('candidate').selectAll().limit(1).executeTakeFirstOrThrow()
  const { id: _id, ...values } = source
  const copies = Array.from({ length: 1000 }, (_, index) => ({ ...values, name: `copy ${index}` }))
  for (let from = 0; from < copies.length; from += 250) {
    await scenario.db
      .insertInto('candidate')
      .values(copies.slice(from, from + 250))
      .execute()
  }
  const { text } = await exportFor(scenario.lead, 'csv')
  const names = [...text.matchAll(/(?:lens|copy) \d+/g)].map(([name]) => name)
  expect(names).toHaveLength(1003)
  expect(new Set(names).size).toBe(1003)
})

it('stops reading when the file is ended early, and leaves the database free', async () => {
  await addJudgedCandidate(scenario, 'lens', { grades: 'AAA' })
  const file = await exportCatalogue(scenario.db, await scenario.permit(scenario.lead, 'read'), 'vot')
  await file.text.next()
  await file.text.return()
  expect(await file.text.next()).toEqual({ done: true, value: undefined })
  await addJudgedCandidate(scenario, 'another', { grades: 'AAA' })
})
