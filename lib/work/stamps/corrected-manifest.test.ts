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

describe('what a corrected manifest no longer says', () => {
  it('is withdrawn: position and scale come from the header again, the score is gone', async () => {
    await deliverCandidates(2)
    await intake.deliver('list.csv', 'name,ra,dec,pixel_scale,score\nSWS1,150.5,2.5,0.3,0.9\nSWS2,150.6,2.6,0.3,0.8\n')
    await intake.read()
    expect(await candidate('SWS1')).toMatchObject({ ra_deg: 150.5, score: 0.9, pixel_scale_arcsec: 0.3 })
    await intake.deliver('list.csv', 'name,lens_redshift\nSWS1,0.4\n')
    await intake.read()
    for (const [name, ra, redshift] of [
      ['SWS1', 150.01, 0.4],
      ['SWS2', 150.02, null],
    ] as const) {
      expect(await candidate(name)).toMatchObject({
        ra_deg: expect.closeTo(ra, 9),
        dec_deg: expect.closeTo(2.2, 9),
        pixel_scale_arcsec: expect.closeTo(0.2, 9),
        score: null,
        lens_redshift: redshift,
      })
    }
  })

  it('is withdrawn where lines name files, and what another manifest says stays', async () => {
    await deliverCandidates(1)
    await intake.deliver('other.csv', 'name,score\nSWS1,0.7\n')
    await intake.deliver('list.csv', 'file,score,lens_redshift\nSWS1_g.fits,0.9,0.5\n')
    await intake.read()
    await intake.deliver('list.csv', 'file,source_redshift\nSWS1_g.fits,2\n')
    await intake.read()
    expect(await candidate('SWS1')).toMatchObject({ score: 0.7, lens_redshift: null, source_redshift: 2 })
  })

  it('leaves a designation as it was given, and the manifest says so', async () => {
    await deliverCandidates(1)
    await intake.deliver('list.csv', 'name,ra,dec\nSWS1,150.5,2.5\n')
    await intake.read()
    await intake.db
      .insertInto('designation')
      .values({
        candidate_id: (await candidate('SWS1'))?.id ?? 0,
        campaign_id: intake.campaign.id,
        designation: 'SWS J100200.00+023000.0',
        given_at: '2026-01-01T00:00:00.000Z',
      })
      .execute()
    await intake.deliver('list.csv', 'name,ra,dec\nSWS1,150.6,2.5\n')
    await intake.read()
    expect(await candidate('SWS1')).toMatchObject({ ra_deg: 150.6 })
    expect(await intake.reasonOf('list.csv')).toBe(
      '1 line taken. Line 2: The position of SWS1 has changed; it keeps its designation SWS J100200.00+023000.0, which is given once.',
    )
  })
})
