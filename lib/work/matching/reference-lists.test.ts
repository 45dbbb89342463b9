import { mkdtemp, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import path from 'node:path'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import type { ListMapping } from '@/db/schema/matching'
import { runDueJobs } from '@/lib/platform/jobs/run-jobs'
import { JOB } from '@/lib/platform/jobs/job-kinds'
import { log } from '@/lib/platform/log'
import { BlobStore } from '@/lib/platform/storage/blob-store'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { bringBackList, changeList, changeMatchRadius, discardList, retireList, takeInList } from './change-list'
import { knownLabels } from './known-labels'
import { knownList, knownPage } from './known-page'
import { ListDetails } from './list-details'
import { matchCandidatesJob, matchListJob, readListRows } from './list-jobs'
import type { ListReader } from './list-reader'
import { look } from './list-worker'
import { readList } from './read-list'
import { lookAtUpload, uploadList } from './upload-list'

let scenario: Scenario
let folder: string
let tools: { store: BlobStore; reader: ListReader }
beforeEach(async () => {
  log.level = 'silent'
  folder = await mkdtemp(path.join(tmpdir(), 'ringside-known-'))
  tools = {
    store: new BlobStore(path.join(folder, 'blobs'), path.join(folder, 'incoming')),
    reader: { look, read: (task, keep) => readList(task, keep) },
  }
  scenario = await makeScenario()
})
afterEach(async () => {
  await scenario.db.destroy()
  await rm(folder, { recursive: true, force: true })
})

const lead = () => scenario.permit(scenario.lead, 'lead')
const details = (change = {}) =>
  ListDetails.parse({
    name: 'Marsh lenses',
    source: 'Heron et al. 2019, table 2',
    listDate: '2019 May',
    radiusArcsec: 2,
    keepsOutOfNew: true,
    ...change,
  })

async function upload(text: string, name = 'marsh-lenses.csv') {
  const bytes = new TextEncoder().encode(text)
  async function* chunks() {
    yield bytes
  }
  return uploadList(scenario.db, await lead(), tools, {
    name,
    body: { chunks: chunks(), contentLength: String(bytes.length) },
  })
}

const readAgain = (
  { listId, mapping }: { listId: number; mapping?: ListMapping },
  progress: (done: number, total: number) => Promise<void>,
) => readListRows(scenario.db, tools, listId, progress, mapping)
const jobs = {
  [JOB.readList]: ({ payload, progress }: { payload: unknown; progress: (a: number, b: number) => Promise<void> }) =>
    readAgain(payload as { listId: number; mapping?: ListMapping }, progress),
  [JOB.matchList]: matchListJob,
  [JOB.matchCandidates]: matchCandidatesJob,
}
async function takeIn(id: number, change: object = {}) {
  const { mapping } = await lookAtUpload(scenario.db, await lead(), tools, id, null)
  await takeInList(scenario.db, await lead(), id, { details: details(), mapping: { ...mapping, ...change } })
  await runDueJobs(scenario.db, jobs)
  return knownList(scenario.db, await lead(), id)
}
const LIST = 'name,ra,dec\nOld ring,150.1,2.2\nReed arc,10,20\nNowhere,,\n'
const SWAPPED = `name,dec,ra\n${Array.from({ length: 12 }, (_, k) => `R${k},${150 + k},${k}`).join('\n')}\n`

describe('a reference list', () => {
  it('is kept with its file, source and date, read as a job and labels what lies there', async () => {
    const candidate = await addImagedCandidate(scenario.db, scenario.campaign, 'SWS 1', {
      raDeg: 150.1001,
      decDeg: 2.2,
    })
    const { id, isNew } = await upload(LIST)
    expect(isNew).toBe(true)
    expect(await knownList(scenario.db, await lead(), id)).toMatchObject({
      state: 'draft',
      name: 'marsh-lenses',
      rows: 0,
    })
    const list = await takeIn(id)
    expect(list).toMatchObject({
      state: 'ready',
      name: 'Marsh lenses',
      source: 'Heron et al. 2019, table 2',
      listDate: '2019 May',
      rows: 3,
      positions: 2,
      matched: 1,
      uploadedBy: 'avocet',
    })
    expect(list.reason).toMatch(/Line 4 has no right ascension/)
    const labels = await knownLabels(scenario.db, await lead(), [candidate])
    expect(labels.get(candidate)).toMatchObject([{ list: 'Marsh lenses', name: 'Old ring', rowNumber: 2 }])
    // 0.0001 degrees of right ascension at declination 2.2: 0.36 arcsec times cos(2.2 degrees).
    expect(labels.get(candidate)![0].separationArcsec).toBeCloseTo(0.36 * Math.cos((2.2 * Math.PI) / 180), 6)
  })

  it('sent again is the list that is here', async () => {
    const { id } = await upload(LIST)
    expect(await upload(LIST, 'other-name.csv')).toEqual({ id, isNew: false })
  })

  it('with swapped columns is refused in words, keeps file and choice, and is there once they are mended', async () => {
    const { id } = await upload(SWAPPED)
    const refused = await takeIn(id)
    expect(refused.state).toBe('refused')
    expect(refused.reason).toMatch(/columns are probably swapped\. Swap them\./)
    expect(refused.mapping).toMatchObject({ ra: 'ra', dec: 'dec' })
    expect(await scenario.db.selectFrom('reference_object').selectAll().execute()).toEqual([])
    expect(await takeIn(id, { ra: 'dec', dec: 'ra' })).toMatchObject({
      state: 'ready',
      rows: 12,
      positions: 12,
      reason: null,
    })
  })

  it('in force stands as it was where a new choice of columns cannot be read, and follows one that can', async () => {
    const { db, campaign } = scenario
    const candidate = await addImagedCandidate(db, campaign, 'SWS 1', { raDeg: 150.1, decDeg: 2.2 })
    const rows = Array.from({ length: 12 }, (_, k) => `R${k},N${k},${150.1 + k},${2.2 + k}`)
    const { id } = await upload(`name,other,ra,dec\n${rows.join('\n')}\n`)
    const before = await takeIn(id)
    const wrong = await takeIn(id, { ra: 'dec', dec: 'ra' })
    expect(wrong).toMatchObject({ state: 'ready', rows: 12, matched: 1, mapping: before.mapping })
    expect(wrong.reason).toMatch(/^The list stands as it was before\. By the new choice: .*probably swapped/)
    const labels = async () => (await knownLabels(db, await lead(), [candidate])).get(candidate)
    expect(await labels()).toMatchObject([{ name: 'R0' }])
    const right = await takeIn(id, { ...before.mapping, name: 'other' })
    expect(right).toMatchObject({ state: 'ready', rows: 12, matched: 1, reason: null })
    expect(await labels()).toMatchObject([{ name: 'N0' }])
  })

  it('in force labels while it is looked through anew, and is changed or retired only after that', async () => {
    const { db, campaign } = scenario
    const candidate = await addImagedCandidate(db, campaign, 'SWS 1', { raDeg: 150.1, decDeg: 2.2 })
    const { id } = await upload(LIST)
    const { mapping } = await takeIn(id)
    await takeInList(db, await lead(), id, { details: details(), mapping: mapping! })
    expect((await knownLabels(db, await lead(), [candidate])).size).toBe(1)
    await expect(retireList(db, await lead(), id)).rejects.toThrow(/is being read/)
    await expect(takeInList(db, await lead(), id, { details: details(), mapping: mapping! })).rejects.toThrow(
      /is being read/,
    )
    await runDueJobs(db, jobs)
    expect(await retireList(db, await lead(), id)).toEqual({ name: 'Marsh lenses' })
  })

  it('is read again from nothing after a kill in the middle, without doubling', async () => {
    const rows = Array.from({ length: 2500 }, (_, k) => `${k / 10},${k / 100}`)
    const { id } = await upload(`ra,dec\n${rows.join('\n')}\n`)
    const { mapping } = await lookAtUpload(scenario.db, await lead(), tools, id, null)
    await takeInList(scenario.db, await lead(), id, { details: details(), mapping })
    let parts = 0
    const killed: ListReader = {
      ...tools.reader,
      read: (task, keep) =>
        readList(task, async (part) => {
          if (++parts === 2) await new Promise(() => {})
          await keep(part)
        }),
    }
    void readListRows(scenario.db, { ...tools, reader: killed }, id, async () => {})
    const kept = () => scenario.db.selectFrom('reference_object').select('row_number').execute()
    while ((await kept()).length < 1000) await new Promise((resolve) => setImmediate(resolve))
    expect(await knownList(scenario.db, await lead(), id)).toMatchObject({ state: 'reading' })
    await readListRows(scenario.db, tools, id, async () => {})
    expect(await knownList(scenario.db, await lead(), id)).toMatchObject({ state: 'ready', rows: 2500 })
    expect(await kept()).toHaveLength(2500)
  })

  it('whose reader breaks down is refused in words instead of being tried for ever', async () => {
    const { id } = await upload(LIST)
    const { mapping } = await lookAtUpload(scenario.db, await lead(), tools, id, null)
    await takeInList(scenario.db, await lead(), id, { details: details(), mapping })
    const broken: ListReader = { ...tools.reader, read: () => Promise.reject(new Error('out of memory')) }
    await readListRows(scenario.db, { ...tools, reader: broken }, id, async () => {})
    expect(await knownList(scenario.db, await lead(), id)).toMatchObject({
      state: 'refused',
      reason: expect.stringMatching(/could not be read to its end/),
    })
  })

  it('is matched again when its radius grows, and keeps out of new what its lead says', async () => {
    await addImagedCandidate(scenario.db, scenario.campaign, 'SWS 1', { raDeg: 150.101, decDeg: 2.2 })
    const { id } = await upload(LIST)
    expect((await takeIn(id)).matched).toBe(0)
    await changeList(scenario.db, await lead(), id, details({ radiusArcsec: 5, keepsOutOfNew: false }))
    await runDueJobs(scenario.db, jobs)
    expect(await knownList(scenario.db, await lead(), id)).toMatchObject({
      matched: 1,
      radiusArcsec: 5,
      keepsOutOfNew: false,
    })
  })

  it('labels nothing while it is retired, and knows what came meanwhile once it is back', async () => {
    const { id } = await upload(LIST)
    await takeIn(id)
    await retireList(scenario.db, await lead(), id)
    const candidate = await addImagedCandidate(scenario.db, scenario.campaign, 'SWS 1', { raDeg: 150.1, decDeg: 2.2 })
    await matchCandidatesJob({
      db: scenario.db,
      payload: { campaignId: scenario.campaign.id },
      progress: async () => {},
    })
    expect((await knownLabels(scenario.db, await lead(), [candidate])).size).toBe(0)
    await expect(retireList(scenario.db, await lead(), id)).rejects.toThrow(/retired already/)
    await bringBackList(scenario.db, await lead(), id)
    await runDueJobs(scenario.db, jobs)
    expect((await knownLabels(scenario.db, await lead(), [candidate])).size).toBe(1)
    await expect(bringBackList(scenario.db, await lead(), id)).rejects.toThrow(/not retired/)
  })

  it('that was never in force can be thrown away and sent again; one that was stays on record', async () => {
    const { db } = scenario
    const draft = await upload(LIST)
    expect(await discardList(db, await lead(), draft.id)).toEqual({ name: 'marsh-lenses' })
    expect((await knownPage(db, await lead())).lists).toEqual([])
    const refused = await upload(SWAPPED)
    await takeIn(refused.id)
    await discardList(db, await lead(), refused.id)
    const again = await upload(LIST)
    expect(again.isNew).toBe(true)
    await takeIn(again.id)
    await expect(discardList(db, await lead(), again.id)).rejects.toMatchObject({ status: 409, type: 'was-in-force' })
    await retireList(db, await lead(), again.id)
    await expect(discardList(db, await lead(), again.id)).rejects.toMatchObject({ status: 409, type: 'was-in-force' })
    await expect(discardList(db, await lead(), 999)).rejects.toMatchObject({ status: 404 })
    const events = await db
      .selectFrom('audit_event')
      .select('action')
      .where('action', '=', 'matching.list-discarded')
      .execute()
    expect(events).toHaveLength(2)
  })

  it('cannot be changed while it is read, nor read while it is retired', async () => {
    const { id } = await upload(LIST)
    const { mapping } = await lookAtUpload(scenario.db, await lead(), tools, id, null)
    await takeInList(scenario.db, await lead(), id, { details: details(), mapping })
    await expect(retireList(scenario.db, await lead(), id)).rejects.toThrow(/is being read/)
    await expect(changeList(scenario.db, await lead(), id, details())).rejects.toThrow(/is being read/)
    await runDueJobs(scenario.db, jobs)
    await retireList(scenario.db, await lead(), id)
    const again = takeInList(scenario.db, await lead(), id, { details: details(), mapping })
    await expect(again).rejects.toThrow(/Bring it back before/)
  })

  it('is refused by what it is when it is no list, and nothing is kept of it', async () => {
    await expect(upload('<html></html>', 'page.html')).rejects.toThrow(/not a VOTable/)
    expect((await knownPage(scenario.db, await lead())).lists).toEqual([])
  })

  it('is for leads to send and for viewers to read; graders learn nothing of it', async () => {
    const { db, reader, graders, permit, stranger, otherCampaign } = scenario
    await expect(permit(graders[0], 'lead')).rejects.toThrow(/Only a lead/)
    await expect(permit(reader, 'lead')).rejects.toThrow(/Only a lead/)
    const { id } = await upload(LIST)
    await takeIn(id)
    const seen = await knownPage(db, await permit(reader, 'read'))
    expect(seen.lists).toMatchObject([{ name: 'Marsh lenses', uploadedBy: 'a lead' }])
    await expect(knownPage(db, await permit(graders[0], 'read'))).rejects.toThrow(/leads and viewers/)
    // A lead of another campaign has no way to it.
    const { permitCampaign } = await import('@/lib/work/people/permission')
    const elsewhere = await permitCampaign(db, stranger, otherCampaign.slug, 'lead')
    await expect(retireList(db, elsewhere, id)).rejects.toThrow(/no list here/)
    await expect(discardList(db, elsewhere, id)).rejects.toThrow(/no list here/)
    await expect(lookAtUpload(db, elsewhere, tools, id, null)).rejects.toThrow(/no list here/)
  })
})

describe('what is told of a list', () => {
  it.each([
    ['name', ' ', /Name the list/],
    ['source', '', /where the list comes from/],
    ['listDate', '', /of when the list is/],
    ['radiusArcsec', 'wide', /radius in arcseconds/],
    ['radiusArcsec', '0', /larger than 0/],
    ['radiusArcsec', '4000', /at most 600/],
  ])('is refused where its %s is %j', (field, value, expected) => {
    const result = ListDetails.safeParse({ ...details(), [field]: value })
    expect(result.error?.issues[0].message).toMatch(expected)
  })
})

it('matches all again when the radius between candidates grows', async () => {
  const { db, campaign } = scenario
  for (const ra of [10, 10.001]) await addImagedCandidate(db, campaign, `SWS ${ra}`, { raDeg: ra, decDeg: 0 })
  await changeMatchRadius(db, await lead(), 2)
  await runDueJobs(db, jobs)
  await matchCandidatesJob({ db, payload: { campaignId: campaign.id }, progress: async () => {} })
  expect(await db.selectFrom('candidate_match').selectAll().execute()).toEqual([])
  await changeMatchRadius(db, await lead(), 5)
  await runDueJobs(db, jobs)
  expect(await db.selectFrom('candidate_match').selectAll().execute()).toHaveLength(1)
})
