import { afterEach, beforeEach, expect, it } from 'vitest'
import { addMember, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { changeView, deleteView, savedViews, SaveViewInput, saveView } from './saved-views'

let scenario: Scenario
beforeEach(async () => {
  scenario = await makeScenario()
})
afterEach(() => scenario.db.destroy())

const permit = (viewer: Scenario['lead']) => scenario.permit(viewer, 'read')
const save = async (viewer: Scenario['lead'], name: string, more: { query?: string; shared?: boolean } = {}) =>
  saveView(scenario.db, await permit(viewer), 'candidates', { name, query: 'mean=%3E2', shared: false, ...more })
const views = async (viewer: Scenario['lead'], page: 'candidates' | 'catalogue' = 'candidates') =>
  savedViews(scenario.db, await permit(viewer), page)
const change = async (viewer: Scenario['lead'], input: { id: number; name: string; shared: boolean }) =>
  changeView(scenario.db, await permit(viewer), input)

it('keeps a table under a name, for the person and the page that it is of', async () => {
  const [grader, other] = scenario.graders
  await save(grader, 'To look at again', { query: 'state=split&columns=mean,ra' })
  expect((await views(grader)).own).toEqual([
    {
      id: expect.any(Number),
      name: 'To look at again',
      query: 'state=split&columns=mean,ra',
      shared: false,
      by: null,
    },
  ])
  expect(await views(grader, 'catalogue')).toMatchObject({ own: [], shared: [] })
  expect(await views(other)).toMatchObject({ own: [], shared: [], mayShare: false })
})

it('shares what a lead shares with every member, under the lead’s pseudonym, and to leads the name', async () => {
  await save(scenario.lead, 'Splits first', { shared: true })
  await save(scenario.lead, 'My own', {})
  expect(await views(scenario.lead)).toMatchObject({
    own: [
      { name: 'My own', shared: false },
      { name: 'Splits first', shared: true },
    ],
    shared: [],
    mayShare: true,
  })
  for (const viewer of [scenario.graders[0], scenario.reader]) {
    expect(await views(viewer)).toMatchObject({ own: [], shared: [{ name: 'Splits first', by: 'G01' }] })
  }
  await addMember(scenario.db, scenario.campaign, scenario.stranger, 'lead', 'G77')
  expect((await views(scenario.stranger)).shared).toMatchObject([{ name: 'Splits first', by: 'avocet' }])
})

it('shares nothing with strangers', async () => {
  await save(scenario.lead, 'Splits first', { shared: true })
  await expect(views(scenario.stranger)).rejects.toMatchObject({ status: 404 })
})

it('ends sharing with the lead of who shared', async () => {
  await save(scenario.lead, 'Splits first', { shared: true })
  await addMember(scenario.db, scenario.campaign, scenario.lead, 'grader', 'G01')
  expect((await views(scenario.reader)).shared).toEqual([])
  expect((await views(scenario.lead)).own).toHaveLength(1)
})

it('refuses a name that the person has for this page already, in any spelling, and takes it from others', async () => {
  await save(scenario.lead, 'Splits')
  await expect(save(scenario.lead, 'splits')).rejects.toMatchObject({
    status: 422,
    message: expect.stringMatching(/a view called “Splits” already/),
  })
  await save(scenario.graders[0], 'Splits')
  const input = { name: 'Splits', query: '', shared: false }
  await saveView(scenario.db, await permit(scenario.lead), 'catalogue', input)
  expect((await views(scenario.lead)).own).toHaveLength(1)
})

it('renames, shares and takes back, but not under a name in use', async () => {
  const { id } = await save(scenario.lead, 'Splits')
  await save(scenario.lead, 'Others')
  await change(scenario.lead, { id, name: 'SPLITS', shared: true })
  expect((await views(scenario.reader)).shared).toMatchObject([{ name: 'SPLITS' }])
  await change(scenario.lead, { id, name: 'SPLITS', shared: false })
  expect((await views(scenario.reader)).shared).toEqual([])
  await expect(change(scenario.lead, { id, name: 'others', shared: false })).rejects.toMatchObject({ status: 422 })
})

it('refuses to everybody but leads to share, by saving and by changing', async () => {
  const { id } = await save(scenario.graders[0], 'Mine')
  await expect(save(scenario.graders[0], 'Ours', { shared: true })).rejects.toMatchObject({ status: 403 })
  await expect(change(scenario.graders[0], { id, name: 'Mine', shared: true })).rejects.toMatchObject({ status: 403 })
  await expect(save(scenario.reader, 'Ours', { shared: true })).rejects.toMatchObject({ status: 403 })
})

it('deletes and changes nobody else’s views, shared ones neither', async () => {
  const { id } = await save(scenario.lead, 'Splits', { shared: true })
  for (const viewer of [scenario.graders[0], scenario.reader]) {
    await expect(deleteView(scenario.db, await permit(viewer), id)).rejects.toMatchObject({ status: 404 })
    await expect(change(viewer, { id, name: 'Taken', shared: false })).rejects.toMatchObject({ status: 404 })
  }
  expect((await views(scenario.lead)).own).toMatchObject([{ name: 'Splits', shared: true }])
  expect(await deleteView(scenario.db, await permit(scenario.lead), id)).toEqual({ name: 'Splits' })
  expect((await views(scenario.lead)).own).toEqual([])
})

it('says when there are too many', async () => {
  for (let n = 1; n <= 60; n++) await save(scenario.lead, `View ${n}`)
  await expect(save(scenario.lead, 'One more')).rejects.toMatchObject({ message: expect.stringMatching(/60 views/) })
})

it.each([
  [{ name: '  ', query: '' }, 'Give the view a name.'],
  [{ query: '' }, 'Give the view a name.'],
  [{ name: 'n'.repeat(61), query: '' }, 'A name has at most 60 letters.'],
  [{ name: 'long', query: 'q'.repeat(4001) }, 'These filters are too long to be saved. Take some off.'],
])('says what is wrong with %j', (input, sentence) => {
  const { error } = SaveViewInput.safeParse(input)
  expect(error?.issues.map(({ message }) => message)).toEqual([sentence])
})
