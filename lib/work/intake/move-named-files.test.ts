import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { cutoutFits } from '@/tests/_support/cutouts'
import { delivered } from '@/tests/_support/delivered'
import { makeIntake, type IntakeScenario } from '@/tests/_support/intake'
import { imageCandidates } from '@/lib/work/stamps/image-candidates'

let intake: IntakeScenario
beforeEach(async () => {
  intake = await makeIntake()
  await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 1 }))
  await intake.deliver('SWS1_r.fits', cutoutFits({ seed: 2 }))
  await intake.read()
})
afterEach(() => intake.remove())

const look = delivered(() => intake)

async function sendManifest(text: string): Promise<void> {
  await intake.deliver('list.csv', text)
  await intake.read()
  await imageCandidates(intake.tools, { campaignId: intake.campaign.id }, async () => {})
}

describe('a later manifest that names another candidate for an imaged file', () => {
  it('moves it there, and what is left of the old candidate is drawn anew', async () => {
    const before = (await look.stampRows()).filter(({ name }) => name === 'SWS1')
    await sendManifest('file,candidate,band\nSWS1_r.fits,SWS2,r\n')
    expect(await look.bandsOf('SWS1')).toEqual(['g SWS1_g.fits 1'])
    expect(await look.bandsOf('SWS2')).toEqual(['r SWS1_r.fits 2'])
    expect(await intake.fates()).toEqual({ 'SWS1_g.fits': 'imaged', 'SWS1_r.fits': 'imaged', 'list.csv': 'read' })
    const after = (await look.stampRows()).filter(({ name }) => name === 'SWS1')
    expect(after).not.toEqual(before)
    expect(await look.candidate('SWS1')).toMatchObject({ imaged_at: expect.any(String) })
  })

  it('leaves it where it was graded, and says so with the line', async () => {
    await intake.db.updateTable('candidate').set({ grades_given: 2 }).execute()
    await sendManifest('file,candidate,band\nSWS1_r.fits,SWS2,r\n')
    expect(await look.bandsOf('SWS1')).toEqual(['g SWS1_g.fits 1', 'r SWS1_r.fits 2'])
    expect(await look.candidate('SWS2')).toBeUndefined()
    expect(await intake.reasonOf('list.csv')).toBe(
      "1 line taken. Line 2: 'SWS1_r.fits' is imaged as SWS1, which has been graded 2 times, so it stays there although this line says SWS2.",
    )
  })

  it('moves nothing that it names as it is', async () => {
    await sendManifest('file,candidate,band\nSWS1_r.fits,SWS1,r\n')
    expect(await look.bandsOf('SWS1')).toEqual(['g SWS1_g.fits 1', 'r SWS1_r.fits 2'])
    expect(await intake.reasonOf('list.csv')).toBe('1 line taken.')
  })
})
