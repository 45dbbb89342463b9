import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { runDueJobs } from '@/lib/platform/jobs/run-jobs'
import { cutoutFits } from '@/tests/_support/cutouts'
import { makeIntake, type IntakeScenario } from '@/tests/_support/intake'
import { FileListQuery, listDeliveredFiles } from './list-files'
import { tryRefusedAgain, tryUnmatchedAgain } from './try-again'

let intake: IntakeScenario
beforeEach(async () => {
  intake = await makeIntake()
})
afterEach(() => intake.remove())

const list = (query: Record<string, string> = {}) =>
  listDeliveredFiles(intake.db, intake.leadPermit, FileListQuery.parse(query))

async function deliverSome(): Promise<void> {
  await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 1 }))
  await intake.deliver('SWS1_r.fits', cutoutFits({ seed: 2 }).slice(0, 3000))
  await intake.deliver('copy.fits', cutoutFits({ seed: 1 }))
  await intake.deliver('list.csv', 'name,score\nSWS1,0.5\n')
  await intake.deliver('mystery.fits', cutoutFits({ seed: 3 }))
  await intake.read()
}

describe('the list of files', () => {
  it('tells each file with its fate, candidate and bands, and counts them', async () => {
    await deliverSome()
    const { files, summary, nextCursor } = await list()
    expect(files.map(({ name, fate, candidate, bands }) => [name, fate, candidate, bands.join()])).toEqual([
      ['SWS1_g.fits', 'imaged', 'SWS1', 'g'],
      ['SWS1_r.fits', 'refused', 'SWS1', 'r'],
      ['copy.fits', 'duplicate', null, ''],
      ['list.csv', 'read', null, ''],
      ['mystery.fits', 'refused', null, ''],
    ])
    expect(nextCursor).toBeNull()
    expect(summary).toMatchObject({ files: 5, stored: 0, read: 1, imaged: 1, duplicate: 1, refused: 2, candidates: 1 })
    // The id of a candidate stands only where the file's pixels are in it.
    expect(files.map(({ candidateId }) => candidateId !== null)).toEqual([true, false, false, false, false])
  })

  it('puts refused files first when asked, page by page, each file once', async () => {
    await deliverSome()
    const names: string[] = []
    let cursor: string | null = null
    do {
      const page = await list({ first: 'refused', limit: '2', ...(cursor ? { cursor } : {}) })
      names.push(...page.files.map(({ name }) => name))
      cursor = page.nextCursor
    } while (cursor)
    expect(names).toEqual(['SWS1_r.fits', 'mystery.fits', 'SWS1_g.fits', 'copy.fits', 'list.csv'])
  })

  it('shows one fate, or names with a text in any case', async () => {
    await deliverSome()
    expect((await list({ fate: 'refused' })).files).toHaveLength(2)
    expect((await list({ search: 'sws1_' })).files).toHaveLength(2)
    expect((await list({ search: '%' })).files).toHaveLength(0)
  })

  it('says that work waits until the job is done', async () => {
    await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 1 }))
    expect((await list()).summary.working).toBe(true)
    await intake.db.updateTable('job').set({ run_after: '2026-01-01T00:00:00.000Z' }).execute()
    await runDueJobs(intake.db, { 'read-files': () => intake.read() })
    expect((await list()).summary).toMatchObject({ working: false, imaged: 1 })
  })

  it('says of a replaced file that a newer one has taken its place', async () => {
    await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 1 }))
    await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 2 }))
    await intake.read()
    const { files } = await list()
    expect(files.map(({ replaced, fate }) => [replaced, fate])).toEqual([
      [true, 'duplicate'],
      [false, 'imaged'],
    ])
    expect(files[0].reason).toContain('newer file')
  })

  it('refuses a cursor that it did not give and a limit over 1000', async () => {
    await expect(list({ cursor: 'x' })).rejects.toMatchObject({ status: 422 })
    expect(FileListQuery.safeParse({ limit: '1001' }).success).toBe(false)
    expect(FileListQuery.safeParse({ colour: 'red' }).success).toBe(false)
  })

  it('shows nothing of another campaign', async () => {
    await deliverSome()
    const other = await intake.db
      .selectFrom('file')
      .selectAll()
      .where('campaign_id', '=', intake.otherCampaign.id)
      .execute()
    expect(other).toEqual([])
    await expect(intake.permit(intake.stranger, 'lead')).rejects.toMatchObject({ status: 404 })
  })
})

describe('trying again', () => {
  it('takes every refused file once more, and is in the audit log', async () => {
    await deliverSome()
    expect(await tryRefusedAgain(intake.db, intake.leadPermit)).toBe(2)
    expect((await list({ fate: 'stored' })).files).toHaveLength(2)
    await intake.read()
    expect((await list()).summary.refused).toBe(2)
    const events = await intake.db.selectFrom('audit_event').select('action').execute()
    expect(events).toContainEqual({ action: 'intake.tried-again' })
  })

  it('does nothing when no file is refused', async () => {
    expect(await tryRefusedAgain(intake.db, intake.leadPermit)).toBe(0)
    expect(await intake.db.selectFrom('job').selectAll().execute()).toEqual([])
  })

  it('after another name pattern reads what did not fit and leaves damaged files alone', async () => {
    await intake.deliver('g-SWS1.fits', cutoutFits({ seed: 1 }))
    await intake.deliver('SWS2_g.fits', cutoutFits({ seed: 2 }).slice(0, 3000))
    await intake.read()
    await intake.db.updateTable('campaign').set({ name_pattern: '{band}-{candidate}' }).execute()
    expect(await tryUnmatchedAgain(intake.db, intake.campaign.id)).toBe(1)
    await intake.read()
    expect(await intake.fates()).toEqual({ 'g-SWS1.fits': 'imaged', 'SWS2_g.fits': 'refused truncated-data' })
  })
})
