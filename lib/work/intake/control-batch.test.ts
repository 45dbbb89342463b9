import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { cutoutFits } from '@/tests/_support/cutouts'
import { makeIntake, type IntakeScenario } from '@/tests/_support/intake'
import { permitCampaign } from '@/lib/work/people/permission'
import { type BatchControl, controlBatch } from './control-batch'
import { intakeSummary } from './list-files'
import { tryRefusedAgain } from './try-again'

let intake: IntakeScenario
beforeEach(async () => {
  intake = await makeIntake()
  for (const [batch, seed] of [
    ['Night 1', 1],
    ['Night 2', 2],
  ] as const) {
    await intake.deliver(`SWS${seed}_g.fits`, cutoutFits({ seed }), batch)
  }
})
afterEach(() => intake.remove())

const control = (id: number, reading: BatchControl['reading']) =>
  controlBatch(intake.db, intake.leadPermit, id, { reading })

describe('the reading of a batch', () => {
  it('stands while it is paused, others go on, and it goes on when it is told to', async () => {
    await control(1, 'pause')
    await intake.read()
    expect(await intake.fates()).toEqual({ 'SWS1_g.fits': 'stored', 'SWS2_g.fits': 'imaged' })
    const { batches } = await intakeSummary(intake.db, intake.leadPermit)
    expect(batches).toEqual([{ id: 1, name: 'Night 1', state: 'paused', waiting: 1 }])
    await control(1, 'go on')
    await intake.read()
    expect(await intake.fates()).toEqual({ 'SWS1_g.fits': 'imaged', 'SWS2_g.fits': 'imaged' })
    expect((await intakeSummary(intake.db, intake.leadPermit)).batches).toEqual([])
  })

  it('ends when it is cancelled: what is not read is refused with its bytes kept, and can be tried again', async () => {
    expect(await control(1, 'cancel')).toEqual({ cancelled: 1 })
    await intake.read()
    expect(await intake.fates()).toEqual({ 'SWS1_g.fits': 'refused cancelled', 'SWS2_g.fits': 'imaged' })
    expect(await control(2, 'cancel'), 'what is imaged stays').toEqual({ cancelled: 0 })
    await tryRefusedAgain(intake.db, intake.leadPermit)
    await intake.read()
    expect(await intake.fates()).toEqual({ 'SWS1_g.fits': 'imaged', 'SWS2_g.fits': 'imaged' })
  })

  it('is not for graders, and not for leads of other campaigns', async () => {
    await expect(intake.permit(intake.graders[0], 'lead')).rejects.toMatchObject({ status: 403 })
    const other = await permitCampaign(intake.db, intake.stranger, intake.otherCampaign.slug, 'lead')
    await expect(controlBatch(intake.db, other, 1, { reading: 'cancel' })).rejects.toMatchObject({ status: 404 })
    expect(await intake.fates()).toMatchObject({ 'SWS1_g.fits': 'stored' })
  })
})
