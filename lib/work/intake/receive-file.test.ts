import { existsSync, readdirSync } from 'node:fs'
import path from 'node:path'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { config } from '@/lib/platform/config/config'
import { Problem } from '@/lib/platform/problems/problem'
import { cutoutFits } from '@/tests/_support/cutouts'
import { makeIntake, type IntakeScenario } from '@/tests/_support/intake'
import { receiveFile } from './receive-file'

let intake: IntakeScenario
beforeEach(async () => {
  intake = await makeIntake()
})
afterEach(() => intake.remove())

const rows = () => intake.db.selectFrom('file').selectAll().orderBy('id').execute()
const jobs = () => intake.db.selectFrom('job').selectAll().execute()

describe('a delivered file', () => {
  it('is stored, answered with what its name tells, and read by one job for all', async () => {
    const answer = await intake.deliver('north/SWS1_g.fits', cutoutFits({ seed: 1 }))
    await intake.deliver('north/SWS1_r.fits', cutoutFits({ seed: 2 }))
    expect(answer).toMatchObject({
      name: 'north/SWS1_g.fits',
      fate: 'stored',
      reason: null,
      candidate: 'SWS1',
      band: 'g',
    })
    expect(existsSync(intake.tools.blobs.pathOf(answer.sha256))).toBe(true)
    expect(await jobs()).toMatchObject([{ kind: 'read-files', campaign_id: intake.campaign.id, state: 'queued' }])
  })

  it('changes nothing when it comes again, and names the file that is here and its fate', async () => {
    const first = await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 1 }))
    const before = await rows()
    const again = await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 1 }))
    expect(again).toMatchObject({
      id: first.id,
      fate: 'duplicate',
      reason: expect.stringMatching(/'SWS1_g.fits'.*waiting/),
    })
    expect(await rows()).toEqual(before)
  })

  it('under another name is one row that names the file it repeats', async () => {
    const first = await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 1 }))
    const copy = await intake.deliver('copy.fits', cutoutFits({ seed: 1 }))
    expect(copy).toMatchObject({ fate: 'duplicate', reason: "The same bytes as 'SWS1_g.fits'." })
    expect((await rows()).map(({ duplicate_of }) => duplicate_of)).toEqual([null, first.id])
  })

  it('with other bytes replaces the one of its name, and the audit log says so', async () => {
    const old = await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 1 }))
    const now = await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 2 }))
    expect(now.fate).toBe('stored')
    expect((await rows()).map(({ id, replaced_by }) => [id, replaced_by])).toEqual([
      [old.id, now.id],
      [now.id, null],
    ])
    const events = await intake.db.selectFrom('audit_event').select(['action', 'subject']).execute()
    expect(events).toContainEqual({ action: 'intake.file-replaced', subject: 'SWS1_g.fits' })
  })

  it('that ends in .csv is a manifest', async () => {
    await intake.deliver('list.CSV', 'name\nSWS1\n')
    expect(await rows()).toMatchObject([{ kind: 'manifest' }])
  })

  it('goes into the batch that this person began within the hour, or into the one that is named', async () => {
    await intake.deliver('a_g.fits', 'a')
    await intake.deliver('b_g.fits', 'b')
    await intake.deliver('c_g.fits', 'c', 'Second night')
    await intake.deliver('d_g.fits', 'd', 'Second night')
    const batches = await intake.db.selectFrom('batch').select('name').execute()
    expect(batches.map(({ name }) => name)).toEqual([expect.stringMatching(/^Delivery of /), 'Second night'])
    const ids = (await rows()).map(({ batch_id }) => batch_id)
    expect([ids[0] === ids[1], ids[2] === ids[3], ids[1] === ids[2]]).toEqual([true, true, false])
  })
})

describe('a body', () => {
  async function send(parts: string[], contentLength: string | null, breaks?: Error): Promise<unknown> {
    async function* chunks() {
      for (const part of parts) yield new TextEncoder().encode(part)
      if (breaks) throw breaks
    }
    return receiveFile(intake.db, intake.leadPermit, intake.tools.blobs, {
      name: 'SWS1_g.fits',
      body: { chunks: chunks(), contentLength },
    }).catch((error: unknown) => (error instanceof Problem ? [error.status, error.type] : error))
  }

  const leftOver = () => {
    const folder = path.join(path.dirname(intake.tools.stampFolder), 'incoming')
    return existsSync(folder) ? readdirSync(folder) : []
  }

  it('of the announced length is kept', async () => {
    expect(await send(['ab', 'c'], '3')).toMatchObject({ bytes: 3 })
  })

  it.each([
    ['shorter than announced', ['ab'], '3', [400, 'length-mismatch']],
    ['longer than announced', ['ab', 'cd'], '3', [400, 'length-mismatch']],
    ['without a length', ['ab'], null, [411, 'length-required']],
    ['with a length that is no number', ['ab'], '-2', [411, 'length-required']],
    ['over the limit', ['ab'], String(10 ** 12), [413, 'file-too-large']],
  ])('%s is refused and leaves nothing behind', async (_, parts, length, problem) => {
    expect(await send(parts, length)).toEqual(problem)
    expect(await rows()).toEqual([])
    expect(leftOver()).toEqual([])
  })

  it('that breaks off is refused and leaves nothing behind', async () => {
    expect(await send(['ab'], '3', Object.assign(new Error('aborted'), { code: 'ECONNRESET' }))).toEqual([
      400,
      'length-mismatch',
    ])
    expect(await rows()).toEqual([])
    expect(leftOver()).toEqual([])
  })

  it('for which the disk has no room is refused with 507', async () => {
    const full = vi
      .spyOn(intake.tools.blobs, 'putStream')
      .mockRejectedValue(Object.assign(new Error(), { code: 'ENOSPC' }))
    expect(await send(['abc'], '3')).toEqual([507, 'disk-full'])
    expect(await rows()).toEqual([])
    full.mockRestore()
  })

  it('may be empty: the reader says so', async () => {
    expect(await send([], '0')).toMatchObject({ bytes: 0, fate: 'stored' })
    await intake.read()
    expect(await intake.fates()).toEqual({ 'SWS1_g.fits': 'refused empty' })
  })

  it('may have as many bytes as the site allows', () => {
    expect(config().maxFileBytes).toBe(256 * 1024 * 1024)
  })
})

describe('who may deliver', () => {
  it('is a lead of the campaign and nobody else', async () => {
    await expect(intake.permit(intake.graders[0], 'lead')).rejects.toMatchObject({ status: 403 })
    await expect(intake.permit(intake.reader, 'lead')).rejects.toMatchObject({ status: 403 })
    await expect(intake.permit(intake.stranger, 'lead')).rejects.toMatchObject({ status: 404 })
  })
})
