import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { writeFits } from '@/lib/science/fits/write-fits'
import { cutoutFits, cutoutImage } from '@/tests/_support/cutouts'
import { BANDS, delivered } from '@/tests/_support/delivered'
import { makeIntake, type IntakeScenario } from '@/tests/_support/intake'

let intake: IntakeScenario
beforeEach(async () => {
  intake = await makeIntake()
})
afterEach(() => intake.remove())

const { bandsOf, candidate, candidates, deliverCandidates, stampRows } = delivered(() => intake)

describe('matching beyond the name', () => {
  it('refuses a second file for a candidate and band, naming the first', async () => {
    await intake.deliver('a/SWS1_g.fits', cutoutFits({ seed: 1 }))
    await intake.deliver('b/SWS1_g.fits', cutoutFits({ seed: 2 }))
    await intake.read()
    expect(await intake.fates()).toEqual({ 'a/SWS1_g.fits': 'imaged', 'b/SWS1_g.fits': 'refused band-taken' })
    expect(await intake.reasonOf('b/SWS1_g.fits')).toContain("'a/SWS1_g.fits'")
  })

  it('takes candidate and band from OBJECT and FILTER when the name tells neither', async () => {
    const header = [
      { keyword: 'OBJECT', value: 'SWS7' },
      { keyword: 'FILTER', value: 'r.MP9602' },
    ]
    await intake.deliver('x001.fits', cutoutFits({ seed: 1, header }))
    await intake.read()
    expect(await bandsOf('SWS7')).toEqual(['r x001.fits 1'])
  })

  it('prefers the name to an OBJECT that names the survey tile', async () => {
    for (const [seed, band] of BANDS.entries()) {
      const header = [{ keyword: 'OBJECT', value: 'TILE_43.2_-34.1' }]
      await intake.deliver(`faint_${band}.fits`, cutoutFits({ seed, header }))
    }
    await intake.read()
    expect((await candidates()).map(({ name }) => name)).toEqual(['faint'])
  })

  it.each([
    ['extensions', 'extensions'],
    ['a cube', 'cube'],
  ] as const)('reads all bands of one file from %s and names the candidate by the file', async (_, several) => {
    const images = BANDS.map((band, seed) =>
      cutoutImage({ seed, extname: several === 'cube' ? undefined : band.toUpperCase() }),
    )
    await intake.deliver('SWS5.fits', writeFits(images, { several }))
    await intake.read()
    expect(await bandsOf('SWS5')).toEqual(['g SWS5.fits 1', 'i SWS5.fits 1', 'r SWS5.fits 1'])
    expect(await stampRows()).toHaveLength(5)
  })

  it('names candidates by the file when several files of all bands share an OBJECT', async () => {
    const header = [{ keyword: 'OBJECT', value: 'TILE 12' }]
    for (const number of [1, 2]) {
      const images = BANDS.map((band, seed) => cutoutImage({ seed: 10 * number + seed, extname: band, header }))
      await intake.deliver(`SWS${number}.fits`, writeFits(images))
    }
    await intake.read()
    expect((await candidates()).map(({ name }) => name)).toEqual(['SWS1', 'SWS2'])
  })

  it('refuses what cannot be matched, with the pattern that was tried', async () => {
    await intake.deliver('mystery.fits', cutoutFits({ seed: 1, header: [{ keyword: 'FILTER', value: 'g' }] }))
    await intake.deliver('SWS1.fits', cutoutFits({ seed: 2, header: [{ keyword: 'OBJECT', value: 'SWS1' }] }))
    await intake.read()
    expect(await intake.fates()).toEqual({ 'mystery.fits': 'refused no-candidate', 'SWS1.fits': 'refused no-band' })
    expect(await intake.reasonOf('mystery.fits')).toContain('{candidate}_{band}')
    expect(await candidates()).toEqual([])
  })

  it('reads a refused file under a better name, although its bytes are here', async () => {
    const bytes = cutoutFits({ seed: 1 })
    await intake.deliver('mystery.fits', bytes)
    await intake.read()
    expect((await intake.deliver('SWS1_g.fits', bytes)).fate).toBe('stored')
    await intake.read()
    expect((await intake.fates())['SWS1_g.fits']).toBe('imaged')
  })

  it('reads a file whose twin under a worse name was refused after both were sent', async () => {
    const bytes = cutoutFits({ seed: 1 })
    await intake.deliver('mystery.fits', bytes)
    expect((await intake.deliver('SWS1_g.fits', bytes)).fate).toBe('duplicate')
    await intake.read()
    expect(await intake.fates()).toEqual({ 'mystery.fits': 'refused no-candidate', 'SWS1_g.fits': 'imaged' })
  })
})

describe('a manifest', () => {
  it('that comes later has refused files tried again, and gives score and position', async () => {
    await intake.deliver('mystery.fits', cutoutFits({ seed: 1, position: null }))
    await intake.read()
    await intake.deliver('list.csv', 'file,candidate,band,ra,dec,score\nmystery.fits,SWS9,g,150.5,2.5,0.9\n')
    await intake.read()
    expect(await intake.fates()).toEqual({ 'mystery.fits': 'imaged', 'list.csv': 'read' })
    expect(await candidate('SWS9')).toMatchObject({ ra_deg: 150.5, dec_deg: 2.5, score: 0.9 })
  })

  it('gives candidates that are here already what it tells of them, by name and by file', async () => {
    await deliverCandidates(2)
    await intake.read()
    await intake.deliver('a.csv', 'name,score,z_lens\nSWS1,0.7,0.4\n')
    await intake.deliver('b.csv', 'file,score\nSWS2_g.fits,0.6\n')
    await intake.read()
    expect(await candidate('SWS1')).toMatchObject({ score: 0.7, lens_redshift: 0.4, ra_deg: expect.closeTo(150.01, 6) })
    expect(await candidate('SWS2')).toMatchObject({ score: 0.6 })
  })

  it('wins over the WCS and says how far apart they are', async () => {
    await intake.deliver('list.csv', 'name,ra,dec\nSWS1,150.1,2.21\n')
    await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 1 }))
    await intake.read()
    expect(await candidate('SWS1')).toMatchObject({ ra_deg: 150.1, dec_deg: 2.21 })
    // 0.01 degrees are 36 arcsec.
    expect(await intake.reasonOf('SWS1_g.fits')).toContain('36.0 arcsec')
  })

  it('keeps its position when another band comes later', async () => {
    await intake.deliver('list.csv', 'file,ra,dec\nSWS1_g.fits,150.1,2.21\n')
    await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 1 }))
    await intake.read()
    await intake.deliver('SWS1_r.fits', cutoutFits({ seed: 2 }))
    await intake.read()
    expect(await candidate('SWS1')).toMatchObject({ dec_deg: 2.21 })
  })

  it('in a corrected version under the same name takes the place of the first', async () => {
    await deliverCandidates(1)
    await intake.deliver('list.csv', 'name,score\nSWS1,0.1\n')
    await intake.read()
    await intake.deliver('list.csv', 'name,score\nSWS1,0.8\n')
    await intake.read()
    expect(await candidate('SWS1')).toMatchObject({ score: 0.8 })
  })

  it('is refused without usable columns, and stands in nobody\u2019s way', async () => {
    await intake.deliver('list.csv', 'x,y\n1,2\n')
    await deliverCandidates(1)
    await intake.read()
    expect((await intake.fates())['list.csv']).toBe('refused no-columns')
    expect(await candidates()).toHaveLength(1)
  })
})
