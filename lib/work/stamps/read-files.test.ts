import sharp from 'sharp'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { cutoutFits, SIDE } from '@/tests/_support/cutouts'
import { BANDS, delivered } from '@/tests/_support/delivered'
import { makeIntake, type IntakeScenario } from '@/tests/_support/intake'
import { picturesOf } from './candidate-pictures'
import { readStamp } from './stamp-store'

let intake: IntakeScenario
beforeEach(async () => {
  intake = await makeIntake()
})
afterEach(() => intake.remove())

const { bandsOf, candidate, candidates, deliverCandidates, everything, stampRows } = delivered(() => intake)

describe('reading and imaging a delivery', () => {
  it('makes 12 candidates of 36 files, one of them damaged and one sent twice, and tells which', async () => {
    await deliverCandidates(12)
    await intake.deliver('again.fits', cutoutFits({ seed: 50, position: { raDeg: 150.05, decDeg: 2.2 } }))
    await intake.deliver('north/SWS12_i.fits', cutoutFits({ seed: 122 }).slice(0, 4000))
    await intake.read()

    const fates = Object.values(await intake.fates())
    expect(await candidates()).toHaveLength(12)
    expect((await candidates()).every(({ imaged_at }) => imaged_at !== null)).toBe(true)
    expect(fates.filter((fate) => fate === 'duplicate')).toHaveLength(1)
    expect(await intake.reasonOf('again.fits')).toBe("The same bytes as 'north/SWS5_g.fits'.")
    expect((await intake.fates())['north/SWS12_i.fits']).toBe('refused truncated-data')
    expect(await intake.reasonOf('north/SWS12_i.fits')).toContain('cut off')
    expect((await stampRows()).filter(({ name }) => name === 'SWS1').map(({ view }) => view)).toEqual([
      'band:g',
      'band:i',
      'band:r',
      'colour',
      'deep',
    ])
  })

  it('takes position and pixel scale from the WCS: the middle of the image, 0.2 arcsec', async () => {
    await deliverCandidates(1)
    await intake.read()
    const found = await candidate('SWS1')
    expect(found?.ra_deg).toBeCloseTo(150.01, 9)
    expect(found?.dec_deg).toBeCloseTo(2.2, 9)
    expect(found?.pixel_scale_arcsec).toBeCloseTo(0.2, 9)
  })

  it('stores stamps as PNG at native resolution, grey ones with one channel, under the hash of their bytes', async () => {
    await deliverCandidates(1)
    await intake.read()
    for (const { view, sha256 } of await stampRows()) {
      const bytes = await readStamp(intake.tools.stampFolder, sha256)
      const metadata = await sharp(bytes ?? new Uint8Array()).metadata()
      expect(metadata).toMatchObject({ format: 'png', width: SIDE, height: SIDE, channels: view === 'colour' ? 3 : 1 })
    }
  })

  it('shows pictures with scale, compass and an address, in the order of the recipe', async () => {
    await deliverCandidates(1)
    await intake.read()
    const id = (await candidate('SWS1'))?.id ?? 0
    const pictures = (await picturesOf(intake.db, intake.campaign, [id])).get(id)
    expect(pictures?.views.map(({ key }) => key)).toEqual(['colour', 'deep', 'band:g', 'band:r', 'band:i'])
    expect(pictures?.views[0].url).toMatch(/^\/api\/campaigns\/north-field\/stamps\/[0-9a-f]{64}$/)
    expect(pictures?.geometry.pixelScaleArcsec).toBeCloseTo(0.2, 9)
    expect(pictures?.geometry.northAngleDeg).toBeCloseTo(0, 6)
    expect(pictures?.geometry.eastLeft).toBe(true)
  })

  it('changes nothing when the same files come again and when it runs again', async () => {
    await deliverCandidates(3)
    await intake.read()
    const before = await everything()
    await deliverCandidates(3)
    await intake.read()
    await intake.read()
    expect(await everything()).toEqual(before)
  })

  it('images a candidate with the bands that there are, and anew when another comes', async () => {
    await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 1 }))
    await intake.deliver('SWS1_r.fits', cutoutFits({ seed: 2 }))
    await intake.read()
    const first = await stampRows()
    expect(first.map(({ view }) => view)).toEqual(['band:g', 'band:r', 'colour', 'deep'])
    await intake.deliver('SWS1_i.fits', cutoutFits({ seed: 3 }))
    await intake.read()
    const second = await stampRows()
    expect(second.map(({ view }) => view)).toEqual(['band:g', 'band:i', 'band:r', 'colour', 'deep'])
    const colour = (rows: typeof first) => rows.find(({ view }) => view === 'colour')?.sha256
    expect(colour(second)).not.toBe(colour(first))
  })

  it('keeps and images a candidate without any position, and says so', async () => {
    for (const [seed, band] of BANDS.entries()) {
      await intake.deliver(`SWS1_${band}.fits`, cutoutFits({ seed, position: null }))
    }
    await intake.read()
    expect(await candidate('SWS1')).toMatchObject({ ra_deg: null, dec_deg: null, imaged_at: expect.any(String) })
    expect(await intake.reasonOf('SWS1_g.fits')).toMatch(/^No position/)
  })

  it('says when the bands of one candidate point elsewhere', async () => {
    await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 1 }))
    await intake.deliver('SWS1_r.fits', cutoutFits({ seed: 2, position: { raDeg: 150.1, decDeg: 2.2 + 10 / 3600 } }))
    await intake.read()
    expect(await intake.reasonOf('SWS1_r.fits')).toContain('10.0 arcsec from that of band g')
    expect(await intake.reasonOf('SWS1_g.fits')).toBeNull()
  })
})

describe('a replaced file', () => {
  it('gives its plane to the new one, and its candidate is drawn anew', async () => {
    await deliverCandidates(1)
    await intake.read()
    const before = await stampRows()
    const { id } = await intake.deliver(
      'north/SWS1_g.fits',
      cutoutFits({ seed: 99, position: { raDeg: 150.01, decDeg: 2.2 } }),
    )
    await intake.read()
    expect(await bandsOf('SWS1')).toContain(`g north/SWS1_g.fits ${id}`)
    const after = await stampRows()
    const changed = after.filter((row, index) => row.sha256 !== before[index].sha256).map(({ view }) => view)
    expect(changed).toEqual(['band:g', 'colour', 'deep'])
  })

  it('stays in use when the new one is damaged', async () => {
    await deliverCandidates(1)
    await intake.read()
    const before = { bands: await bandsOf('SWS1'), stamps: await stampRows() }
    await intake.deliver('north/SWS1_g.fits', cutoutFits({ seed: 99 }).slice(0, 3000))
    await intake.read()
    expect(await intake.reasonOf('north/SWS1_g.fits')).toContain('The earlier file of this name stays in use.')
    expect({ bands: await bandsOf('SWS1'), stamps: await stampRows() }).toEqual(before)
  })

  it('comes back when it is sent again', async () => {
    await deliverCandidates(1)
    await intake.read()
    const before = await stampRows()
    await intake.deliver('north/SWS1_g.fits', cutoutFits({ seed: 99 }))
    await intake.read()
    await deliverCandidates(1)
    await intake.read()
    expect(await stampRows()).toEqual(before)
  })
})
