import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { cutoutFits } from '@/tests/_support/cutouts'
import { delivered } from '@/tests/_support/delivered'
import { makeIntake, type IntakeScenario } from '@/tests/_support/intake'

let intake: IntakeScenario
beforeEach(async () => {
  intake = await makeIntake()
})
afterEach(() => intake.remove())

const { candidate, deliverCandidates } = delivered(() => intake)

describe('a correction of a manifest that is refused', () => {
  it('leaves the one before it in force', async () => {
    await intake.deliver('list.csv', 'file,candidate,band,score\nodd.fits,SWS9,g,0.4\n')
    await intake.read()
    await intake.deliver('list.csv', 'x,y\n1,2\n')
    await intake.read()
    expect(await intake.fates()).toEqual({ 'list.csv': 'refused no-columns' })
    await intake.deliver('odd.fits', cutoutFits({ seed: 1 }))
    await intake.read()
    expect(await candidate('SWS9')).toMatchObject({ score: 0.4, imaged_at: expect.any(String) })
  })

  it('leaves the last of several in force, not all of them', async () => {
    for (const score of [0.1, 0.2]) {
      await intake.deliver('list.csv', `name,score,z_lens\nSWS1,${score},${score === 0.1 ? 0.7 : ''}\n`)
      await intake.read()
    }
    await intake.deliver('list.csv', 'x,y\n1,2\n')
    await intake.read()
    await deliverCandidates(1)
    await intake.read()
    expect(await candidate('SWS1')).toMatchObject({ score: 0.2, lens_redshift: null })
  })
})
