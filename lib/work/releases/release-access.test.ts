import { afterEach, beforeEach, expect, it } from 'vitest'
import { findRelease } from '@/db/queries/releases'
import type { Viewer } from '@/lib/work/people/viewer'
import { addGraded, makeReleaseScenario, publishAndMake, RELEASE, type ReleaseScenario } from './_release-scenario'
import { changeAccess, type AccessInput } from './change-access'
import { releaseList } from './list-releases'
import { makeRelease } from './make-release'
import { publicReleases } from './newest-standing'
import { publishRelease } from './publish-release'
import { noticesOf, openReleaseFile, releaseToRead } from './read-release'

let scenario: ReleaseScenario
beforeEach(async () => {
  scenario = await makeReleaseScenario({ gradesWanted: 4, leastGrades: 3 })
  await addGraded(scenario, 'lens', 'AAAB')
})
afterEach(() => scenario.end())

const open = async (number: number, input: AccessInput) =>
  changeAccess(scenario.db, await scenario.permit(scenario.lead, 'lead'), number, input)
const read = (viewer: Viewer | null, token: string | null = null, number = 1) =>
  releaseToRead(scenario.db, scenario.campaign.slug, number, { viewer, token }).then(
    ({ number: found }) => `read ${found}`,
    ({ status }: { status: number }) => status,
  )

it('private is read by leads and viewers, and by nobody else', async () => {
  await publishAndMake(scenario)
  const { lead, reader, graders, stranger } = scenario
  expect(await Promise.all([lead, reader, graders[0], stranger, null].map((viewer) => read(viewer)))).toEqual([
    'read 1',
    'read 1',
    404,
    404,
    404,
  ])
})

it('by link is read with its key; a new link ends the old one, and closing it ends both', async () => {
  await publishAndMake(scenario)
  const { token: first } = await open(1, { access: 'link' })
  expect([await read(null), await read(null, first), await read(null, 'guess')]).toEqual([404, 'read 1', 404])
  const { token: second } = await open(1, { access: 'link' })
  expect([await read(null, first), await read(null, second)]).toEqual([404, 'read 1'])
  await open(1, { access: 'private' })
  expect(await read(null, second)).toBe(404)
})

it('public is read by anybody, once the acronym is said to be registered', async () => {
  await publishAndMake(scenario)
  await expect(open(1, { access: 'public' })).rejects.toMatchObject({
    status: 409,
    type: 'acronym-not-registered',
    message: expect.stringContaining('SWS'),
  })
  expect(await read(null)).toBe(404)
  await open(1, { access: 'public', acronymRegistered: true })
  expect([await read(null), await read(scenario.graders[0]), await read(scenario.stranger)]).toEqual(
    Array(3).fill('read 1'),
  )
})

it('keeps every change with who made it', async () => {
  await publishAndMake(scenario)
  await open(1, { access: 'link' })
  await open(1, { access: 'public', acronymRegistered: true })
  const rows = await scenario.db.selectFrom('release_access').select(['access', 'changed_by']).orderBy('id').execute()
  expect(rows).toEqual(['link', 'public'].map((access) => ({ access, changed_by: scenario.lead.id })))
})

it('is not opened, and not read by anybody, before its files are there', async () => {
  await publishRelease(scenario.db, await scenario.permit(scenario.lead, 'lead'), RELEASE)
  await expect(open(1, { access: 'link' })).rejects.toMatchObject({ status: 409, type: 'release-being-made' })
  expect(await read(scenario.lead)).toBe(404)
})

it.each(['reader', 'grader', 'stranger'] as const)('is not opened by a %s', async (who) => {
  const viewer = who === 'grader' ? scenario.graders[0] : scenario[who]
  await expect(scenario.permit(viewer, 'lead')).rejects.toMatchObject({ status: who === 'stranger' ? 404 : 403 })
})

it('refuses an access that is none, and a release that is none', async () => {
  await publishAndMake(scenario)
  await expect(open(1, { access: 'everybody' as never })).rejects.toThrow(/private, link or public/)
  await expect(open(2, { access: 'private' })).rejects.toMatchObject({ status: 404 })
})

it('tells whoever reads a release of its errata and its retraction, opened or not, once their files are there', async () => {
  await publishAndMake(scenario)
  await open(1, { access: 'public', acronymRegistered: true })
  const permit = await scenario.permit(scenario.lead, 'lead')
  const release = (await findRelease(scenario.db, scenario.campaign.id, 1))!
  const anybody = { viewer: null, token: null }
  const erratum = { ...RELEASE, kind: 'erratum' as const, corrects: 1, statement: 'Positions were off.' }
  const { id } = await publishRelease(scenario.db, permit, erratum)
  expect(await noticesOf(scenario.db, release, anybody)).toEqual([])
  await makeRelease(scenario.tools, id, async () => {})
  const told = { number: 2, kind: 'erratum', statement: 'Positions were off.', isWithdrawn: false }
  expect(await noticesOf(scenario.db, release, anybody)).toEqual([{ ...told, isOpen: false }])
  const reader = { viewer: scenario.reader, token: null }
  expect(await noticesOf(scenario.db, release, reader)).toEqual([{ ...told, isOpen: true }])
  await open(2, { access: 'public', acronymRegistered: true })
  expect(await noticesOf(scenario.db, release, anybody)).toEqual([{ ...told, isOpen: true }])
  await publishAndMake(scenario, { kind: 'retraction', corrects: 1, statement: 'Wrong field.' })
  expect((await noticesOf(scenario.db, release, anybody)).map(({ number, isOpen }) => [number, isOpen])).toEqual([
    [2, true],
    [3, false],
  ])
})

it('passes over what was withdrawn, though the retraction is private, where the newest that stands is asked for', async () => {
  await publishAndMake(scenario)
  await publishAndMake(scenario)
  await open(1, { access: 'public', acronymRegistered: true })
  await open(2, { access: 'public', acronymRegistered: true })
  expect((await publicReleases(scenario.db, scenario.campaign.slug)).standing?.number).toBe(2)
  await publishAndMake(scenario, { kind: 'retraction', corrects: 2, statement: 'Wrong field.' })
  const { releases, standing } = await publicReleases(scenario.db, scenario.campaign.slug)
  expect(standing?.number).toBe(1)
  expect(releases.map(({ release, retractedBy }) => [release.number, retractedBy])).toEqual([
    [2, 3],
    [1, null],
  ])
})

it('lets nothing stand whose erratum was open, though the erratum is withdrawn, and tells that it is', async () => {
  const { release } = await publishAndMake(scenario)
  await open(1, { access: 'public', acronymRegistered: true })
  await publishAndMake(scenario, { kind: 'erratum', corrects: 1, statement: 'Positions were off.' })
  const standing = async () => (await publicReleases(scenario.db, scenario.campaign.slug)).standing?.number ?? null
  expect(await standing()).toBe(1)
  await open(2, { access: 'public', acronymRegistered: true })
  expect(await standing()).toBe(2)
  await publishAndMake(scenario, { kind: 'retraction', corrects: 2, statement: 'Wrong field.' })
  expect(await standing()).toBeNull()
  expect(await noticesOf(scenario.db, release, { viewer: null, token: null })).toMatchObject([
    { number: 2, isWithdrawn: true },
  ])
  await publishAndMake(scenario)
  await open(4, { access: 'public', acronymRegistered: true })
  expect(await standing()).toBe(4)
})

it('serves the bytes that its hash names, and no file that it does not have', async () => {
  const { release, files } = await publishAndMake(scenario)
  const file = await openReleaseFile(scenario.db, scenario.tools.blobs, release, 'catalogue.csv')
  expect(file).toMatchObject({ mediaType: 'text/csv; charset=utf-8; header=present' })
  expect(file.sha256).toBe(files.find(({ name }) => name === 'catalogue.csv')?.sha256)
  const chunks: Buffer[] = []
  for await (const chunk of file.stream()) chunks.push(chunk as Buffer)
  expect(Buffer.concat(chunks)).toHaveLength(file.bytes)
  await expect(openReleaseFile(scenario.db, scenario.tools.blobs, release, '../catalogue.csv')).rejects.toMatchObject({
    status: 404,
  })
})

it('lists them for leads and viewers, newest first with what later ones say, and not for graders', async () => {
  await publishAndMake(scenario)
  await publishAndMake(scenario, { kind: 'erratum', corrects: 1, statement: 'Positions were off.' })
  const list = await releaseList(scenario.db, await scenario.permit(scenario.reader, 'read'))
  expect(list.map(({ number }) => number)).toEqual([2, 1])
  expect(list[1]).toMatchObject({ notices: [{ number: 2, kind: 'erratum' }], making: null, path: '/r/north-field/1' })
  await expect(releaseList(scenario.db, await scenario.permit(scenario.graders[0], 'read'))).rejects.toMatchObject({
    status: 403,
  })
})

it('says how far its files are, and that making them was given up', async () => {
  await publishRelease(scenario.db, await scenario.permit(scenario.lead, 'lead'), RELEASE)
  const making = async () => (await releaseList(scenario.db, await scenario.permit(scenario.lead, 'read')))[0].making
  expect(await making()).toEqual({ done: 0, total: 0, error: null, gaveUp: false })
  await scenario.db
    .updateTable('job')
    .set({ state: 'failed', error: 'The disk is full.' })
    .where('kind', '=', 'make-release')
    .execute()
  expect(await making()).toMatchObject({ error: 'The disk is full.', gaveUp: true })
})
