import { existsSync, rmSync } from 'node:fs'
import sharp from 'sharp'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { log } from '@/lib/platform/log'
import { writeFits } from '@/lib/science/fits/write-fits'
import { cutoutFits, cutoutImage, SIDE } from '@/tests/_support/cutouts'
import { makeIntake, type IntakeScenario } from '@/tests/_support/intake'
import { picturesOf } from './candidate-pictures'
import { readFiles } from './read-files'
import { stampPath } from './stamp-store'

let intake: IntakeScenario
beforeEach(async () => {
  intake = await makeIntake()
})
afterEach(() => intake.remove())

const BANDS = ['g', 'r', 'i']

async function deliverCandidates(count: number): Promise<void> {
  for (let number = 1; number <= count; number++) {
    for (const [index, band] of BANDS.entries()) {
      const position = { raDeg: 150 + number / 100, decDeg: 2.2 }
      await intake.deliver(`north/SWS${number}_${band}.fits`, cutoutFits({ seed: 10 * number + index, position }))
    }
  }
}

const candidates = () => intake.db.selectFrom('candidate').selectAll().orderBy('name').execute()
const candidate = async (name: string) => (await candidates()).find((row) => row.name === name)
const stampRows = () =>
  intake.db
    .selectFrom('stamp')
    .innerJoin('candidate', 'candidate.id', 'stamp.candidate_id')
    .select(['candidate.name', 'stamp.view', 'stamp.sha256'])
    .orderBy('candidate.name')
    .orderBy('stamp.view')
    .execute()
const bandsOf = async (name: string) => {
  const rows = await intake.db
    .selectFrom('plane')
    .innerJoin('candidate', 'candidate.id', 'plane.candidate_id')
    .innerJoin('file', 'file.id', 'plane.file_id')
    .select(['plane.band', 'file.name', 'plane.file_id'])
    .where('candidate.name', '=', name)
    .orderBy('plane.band')
    .execute()
  return rows.map((row) => `${row.band} ${row.name} ${row.file_id}`)
}
/** Everything that reading writes, without times. */
async function everything() {
  const { db } = intake
  const files = await db
    .selectFrom('file')
    .select(['id', 'name', 'fate', 'fault', 'reason', 'duplicate_of', 'replaced_by'])
    .execute()
  const planes = await db.selectFrom('plane').selectAll().orderBy('file_id').orderBy('band').execute()
  const found = (await candidates()).map(({ name, ra_deg, dec_deg, imaged_at }) => [
    name,
    ra_deg,
    dec_deg,
    imaged_at !== null,
  ])
  return {
    files,
    planes: planes.map(({ id: _, candidate_id: __, ...plane }) => plane),
    found,
    stamps: await stampRows(),
  }
}

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
      const metadata = await sharp(stampPath(intake.tools.stampFolder, sha256)).metadata()
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
