import { existsSync, rmSync } from 'node:fs'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { log } from '@/lib/platform/log'
import { cutoutFits } from '@/tests/_support/cutouts'
import { delivered } from '@/tests/_support/delivered'
import { makeIntake, type IntakeScenario } from '@/tests/_support/intake'
import { readFiles } from './read-files'

let intake: IntakeScenario
beforeEach(async () => {
  intake = await makeIntake()
})
afterEach(() => intake.remove())

const { candidates, deliverCandidates, everything } = delivered(() => intake)

describe('after a kill', () => {
  it.each([1, 2, 3])(
    'in the middle of task %i it goes on where it was and ends as if nothing had happened',
    async (dies) => {
      await deliverCandidates(8)
      let tasks = 0
      const { runner } = intake.tools
      const dying = {
        ...intake.tools,
        runner: {
          ...runner,
          image: async (task: Parameters<typeof runner.image>[0]) => {
            const outcomes = await runner.image(task)
            // The stamps of this task are on disk, its rows are not: a disk error ends the run as a kill would.
            if (++tasks >= dies) throw Object.assign(new Error('killed'), { code: 'EIO' })
            return outcomes
          },
        },
      }
      await expect(readFiles(dying, intake.campaign.id, async () => {})).rejects.toThrow('killed')
      const half = (await candidates()).length
      expect(half).toBeLessThan(8)
      await intake.read()
      const resumed = await everything()
      intake.remove()
      intake = await makeIntake()
      await deliverCandidates(8)
      await intake.read()
      expect(resumed).toEqual(await everything())
    },
  )

  it('in the middle of a manifest its lines stand once', async () => {
    await intake.deliver('list.csv', 'name,score\nSWS1,0.1\nSWS2,0.2\n')
    await intake.db
      .insertInto('manifest_row')
      .values({
        campaign_id: intake.campaign.id,
        file_id: 1,
        line: 2,
        file_name: null,
        file_base: null,
        candidate: 'SWS1',
        band: null,
        ra_deg: null,
        dec_deg: null,
        pixel_scale_arcsec: null,
        score: 0.1,
        lens_redshift: null,
        source_redshift: null,
      })
      .execute()
    await intake.read()
    const rows = await intake.db.selectFrom('manifest_row').select(['line', 'candidate']).orderBy('line').execute()
    expect(rows).toEqual([
      { line: 2, candidate: 'SWS1' },
      { line: 3, candidate: 'SWS2' },
    ])
  })

  it('of the disk, a file whose bytes are gone is refused, and is read when it is sent again', async () => {
    const bytes = cutoutFits({ seed: 1 })
    const { sha256 } = await intake.deliver('SWS1_g.fits', bytes)
    rmSync(intake.tools.blobs.pathOf(sha256))
    await intake.read()
    expect(await intake.fates()).toEqual({ 'SWS1_g.fits': 'refused lost' })
    expect((await intake.deliver('SWS1_g.fits', bytes)).fate).toBe('stored')
    await intake.read()
    expect(await intake.fates()).toEqual({ 'SWS1_g.fits': 'imaged' })
    expect(existsSync(intake.tools.blobs.pathOf(sha256))).toBe(true)
  })
})

it('refuses by itself a candidate that brings the reader down, and images the others', async () => {
  const logged = vi.spyOn(log, 'error').mockImplementation(() => {})
  await deliverCandidates(4)
  const { runner } = intake.tools
  const failing = {
    ...intake.tools,
    runner: {
      ...runner,
      image: async (task: Parameters<typeof runner.image>[0]) => {
        if (task.candidates.some(({ name }) => name === 'SWS2')) throw new Error('out of memory')
        return runner.image(task)
      },
    },
  }
  await readFiles(failing, intake.campaign.id, async () => {})
  expect((await intake.fates())['north/SWS2_g.fits']).toBe('refused reader-failed')
  expect((await candidates()).map(({ name }) => name)).toEqual(['SWS1', 'SWS3', 'SWS4'])
  expect(logged).toHaveBeenCalledOnce()
  logged.mockRestore()
})
