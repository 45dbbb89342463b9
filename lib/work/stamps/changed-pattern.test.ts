import { afterEach, beforeEach, expect, it, vi } from 'vitest'
import { JOB } from '@/lib/platform/jobs/job-kinds'
import { runDueJobs } from '@/lib/platform/jobs/run-jobs'
import { changeNamePattern } from '@/lib/work/campaigns/change-settings'
import { cutoutFits } from '@/tests/_support/cutouts'
import { delivered } from '@/tests/_support/delivered'
import { makeIntake, type IntakeScenario } from '@/tests/_support/intake'
import type { ImagingTools } from './campaign-work'
import { readFilesJob } from './imaging-jobs'

let intake: IntakeScenario
vi.mock('./imaging-tools', () => ({ imagingTools: (): ImagingTools => intake.tools }))

beforeEach(async () => {
  intake = await makeIntake()
})
afterEach(() => intake.remove())

const { bandsOf } = delivered(() => intake)
/** Jobs wait a moment for more files; here they are due at once. */
async function runJobs(): Promise<void> {
  await intake.db.updateTable('job').set({ run_after: '2026-01-01T00:00:00.000Z' }).execute()
  await runDueJobs(intake.db, { [JOB.readFiles]: readFilesJob })
}

it('a changed name pattern has files imaged that the old one could not match, and leaves the others where they are', async () => {
  await intake.deliver('r-SWS9.fits', cutoutFits({ seed: 1, position: null }))
  await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 2 }))
  await runJobs()
  expect(await intake.fates()).toEqual({ 'r-SWS9.fits': 'refused no-candidate', 'SWS1_g.fits': 'imaged' })

  await changeNamePattern(intake.db, intake.leadPermit, '{band}-{candidate}')
  await runJobs()

  expect(await intake.fates()).toEqual({ 'r-SWS9.fits': 'imaged', 'SWS1_g.fits': 'imaged' })
  expect(await bandsOf('SWS9')).toEqual(['r r-SWS9.fits 1'])
  expect(await bandsOf('SWS1')).toEqual(['g SWS1_g.fits 2'])
})

it('a name pattern that still does not fit leaves the file refused, with the pattern that was tried', async () => {
  await intake.deliver('r-SWS9.fits', cutoutFits({ seed: 1, position: null }))
  await runJobs()
  await changeNamePattern(intake.db, intake.leadPermit, 'cut-{candidate}-{band}')
  await runJobs()
  expect(await intake.fates()).toEqual({ 'r-SWS9.fits': 'refused no-candidate' })
  expect(await intake.reasonOf('r-SWS9.fits')).toContain('cut-{candidate}-{band}')
})
