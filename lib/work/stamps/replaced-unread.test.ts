import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { intakeSummary } from '@/lib/work/intake/list-files'
import { cutoutFits } from '@/tests/_support/cutouts'
import { delivered } from '@/tests/_support/delivered'
import { makeIntake, type IntakeScenario } from '@/tests/_support/intake'

let intake: IntakeScenario
beforeEach(async () => {
  intake = await makeIntake()
})
afterEach(() => intake.remove())

const { bandsOf, candidate } = delivered(() => intake)
const fates = async () => {
  const rows = await intake.db.selectFrom('file').select(['fate', 'reason']).orderBy('id').execute()
  return rows.map(({ fate }) => fate)
}
const summary = () => intakeSummary(intake.db, intake.leadPermit)

describe('a file that is replaced before it is read', () => {
  it('is not counted as waiting, and is settled when the newer one is read', async () => {
    await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 1 }))
    await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 2 }))
    expect(await summary()).toMatchObject({ stored: 1, files: 1 })
    await intake.read()
    expect(await fates()).toEqual(['duplicate', 'imaged'])
    expect(await summary()).toMatchObject({ stored: 0, imaged: 1 })
    expect(await bandsOf('SWS1')).toEqual(['g SWS1_g.fits 2'])
  })

  it('is read when the newer one is refused, and one before it is settled', async () => {
    await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 1 }))
    await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 2 }))
    await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 3 }).slice(0, 3000))
    await intake.read()
    expect(await fates()).toEqual(['duplicate', 'imaged', 'refused'])
    expect(await bandsOf('SWS1')).toEqual(['g SWS1_g.fits 2'])
    expect(await summary()).toMatchObject({ stored: 0 })
  })

  it('is settled likewise where it is a manifest', async () => {
    await intake.deliver('list.csv', 'name,score\nSWS1,0.1\n')
    await intake.deliver('list.csv', 'name,score\nSWS1,0.2\n')
    await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 1 }))
    await intake.read()
    expect(await fates()).toEqual(['duplicate', 'read', 'imaged'])
    expect(await candidate('SWS1')).toMatchObject({ score: 0.2 })
  })

  it('is read when it is sent again', async () => {
    await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 1 }))
    await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 2 }))
    await intake.read()
    await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 1 }))
    await intake.read()
    expect(await bandsOf('SWS1')).toEqual(['g SWS1_g.fits 1'])
  })
})
