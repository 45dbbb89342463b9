import { afterEach, beforeEach, expect, it } from 'vitest'
import { JOB } from '@/lib/platform/jobs/job-kinds'
import { cutoutFits } from '@/tests/_support/cutouts'
import { delivered } from '@/tests/_support/delivered'
import { makeIntake, type IntakeScenario } from '@/tests/_support/intake'
import { requestImaging } from './commit-outcomes'
import { imageCandidates } from './image-candidates'

let intake: IntakeScenario
beforeEach(async () => {
  intake = await makeIntake()
})
afterEach(() => intake.remove())

const { bandsOf, candidate, deliverCandidates, stampRows } = delivered(() => intake)

it('pictures drawn of a file that is replaced meanwhile are not put over those of its replacement', async () => {
  await deliverCandidates(1)
  await intake.read()
  const old = await stampRows()
  const id = (await candidate('SWS1'))?.id ?? 0
  const { runner } = intake.tools
  let correct = true
  const slow = {
    ...intake.tools,
    runner: {
      ...runner,
      image: async (task: Parameters<typeof runner.image>[0]) => {
        const outcomes = await runner.image(task)
        if (correct) {
          correct = false
          await intake.deliver('north/SWS1_g.fits', cutoutFits({ seed: 99, position: { raDeg: 150.01, decDeg: 2.2 } }))
          await intake.read()
        }
        return outcomes
      },
    },
  }
  await imageCandidates(slow, { campaignId: intake.campaign.id, candidateIds: [id] }, async () => {})
  const shown = await stampRows()
  expect(await bandsOf('SWS1')).toContain('g north/SWS1_g.fits 4')
  expect(shown.find(({ view }) => view === 'band:g')).not.toEqual(old.find(({ view }) => view === 'band:g'))
  const jobs = await intake.db.selectFrom('job').select('kind').where('state', '=', 'queued').execute()
  expect(jobs.map(({ kind }) => kind)).toContain(JOB.imageCandidates)
  await imageCandidates(intake.tools, { campaignId: intake.campaign.id, candidateIds: [id] }, async () => {})
  expect(await stampRows()).toEqual(shown)
})

it('what was noted of a file stays when its candidate is drawn later, and why it was not drawn goes', async () => {
  await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 1 }))
  await intake.read()
  await intake.db
    .updateTable('file')
    .set({ fate: 'read', reason: "The manifest's position is used. Not imaged: the pictures could not be made." })
    .execute()
  await requestImaging(intake.db, intake.campaign.id)
  const id = (await candidate('SWS1'))?.id ?? 0
  await imageCandidates(intake.tools, { campaignId: intake.campaign.id, candidateIds: [id] }, async () => {})
  expect(await intake.fates()).toEqual({ 'SWS1_g.fits': 'imaged' })
  expect(await intake.reasonOf('SWS1_g.fits')).toBe("The manifest's position is used.")
})
