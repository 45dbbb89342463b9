import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { setBatchState } from '@/db/queries/batches'
import { cutoutFits } from '@/tests/_support/cutouts'
import { delivered } from '@/tests/_support/delivered'
import { makeIntake, type IntakeScenario } from '@/tests/_support/intake'

let intake: IntakeScenario
beforeEach(async () => {
  intake = await makeIntake()
})
afterEach(() => intake.remove())

const { bandsOf, candidates, stampRows } = delivered(() => intake)
const inBand = (seed: number, band: string) =>
  cutoutFits({
    seed,
    header: [
      { keyword: 'OBJECT', value: 'SWS1' },
      { keyword: 'FILTER', value: band },
    ],
  })

describe('files whose bytes were mixed up', () => {
  it('are put right under the same names: each is read again and has its own picture', async () => {
    const [g, r] = [cutoutFits({ seed: 1 }), cutoutFits({ seed: 2 })]
    await intake.deliver('SWS1_g.fits', r)
    await intake.deliver('SWS1_r.fits', g)
    await intake.read()
    const mixed = await stampRows()
    expect((await intake.deliver('SWS1_g.fits', g)).fate).toBe('stored')
    expect((await intake.deliver('SWS1_r.fits', r)).fate).toBe('stored')
    await intake.read()
    expect(await bandsOf('SWS1')).toEqual(['g SWS1_g.fits 3', 'r SWS1_r.fits 4'])
    const sha = (rows: typeof mixed, view: string) => rows.find((row) => row.view === view)?.sha256
    const right = await stampRows()
    expect(sha(right, 'band:g')).toBe(sha(mixed, 'band:r'))
    expect(sha(right, 'band:r')).toBe(sha(mixed, 'band:g'))
  })

  it.each(['together', 'one after the other'])(
    'are put right where the header tells the band, sent %s',
    async (sent) => {
      await intake.deliver('one.fits', inBand(1, 'r'))
      await intake.deliver('two.fits', inBand(2, 'g'))
      await intake.read()
      await intake.deliver('one.fits', inBand(3, 'g'))
      if (sent !== 'together') await intake.read()
      await intake.deliver('two.fits', inBand(4, 'r'))
      await intake.read()
      expect(await bandsOf('SWS1')).toEqual(['g one.fits 3', 'r two.fits 4'])
      expect(await intake.fates()).toEqual({ 'one.fits': 'imaged', 'two.fits': 'imaged' })
    },
  )
})

describe('files of one candidate whose headers tell other bands than before', () => {
  const names = ['one', 'two', 'three']
  const list = `file,candidate\n${names.map((name) => `${name}.fits,SWS1`).join('\n')}\n`
  const deliver = async (
    bands: string,
    seed: number,
    batchOf: (name: string) => string | undefined = () => undefined,
  ) => {
    for (const [index, name] of names.entries()) {
      await intake.deliver(`${name}.fits`, inBand(seed + index, bands[index]), batchOf(name))
    }
  }
  const settled = async (expected: string[]) => {
    await intake.read()
    expect(await bandsOf('SWS1')).toEqual(expected)
    expect(Object.values(await intake.fates())).not.toContainEqual(expect.stringContaining('refused'))
  }
  beforeEach(async () => {
    await intake.deliver('list.csv', list)
    await deliver('gri', 1)
    await settled(['g one.fits 2', 'i three.fits 4', 'r two.fits 3'])
  })

  it.each([
    ['two that changed places', 'rgi', ['g two.fits 6', 'i three.fits 7', 'r one.fits 5']],
    ['three that moved on by one', 'rig', ['g three.fits 7', 'i two.fits 6', 'r one.fits 5']],
  ])('settle by themselves although each is looked at alone: %s', async (_, bands, expected) => {
    intake.tools.filesPerPage = 1
    await deliver(bands, 10)
    await settled(expected)
  })

  it('settle when the batch of the last of them goes on', async () => {
    await deliver('rgi', 10, (name) => (name === 'two' ? 'later' : 'now'))
    const batch = await intake.db.selectFrom('batch').select('id').where('name', '=', 'later').executeTakeFirstOrThrow()
    await setBatchState(intake.db, batch.id, 'paused')
    await intake.read()
    expect((await intake.fates())['one.fits']).toBe('refused band-taken')
    await setBatchState(intake.db, batch.id, 'open')
    await settled(['g two.fits 6', 'i three.fits 7', 'r one.fits 5'])
  })

  it('stay refused where the file that has the band is not corrected', async () => {
    await intake.deliver('one.fits', inBand(10, 'r'))
    await intake.deliver('three.fits', inBand(11, 'i'))
    await intake.read()
    expect(await intake.fates()).toMatchObject({ 'one.fits': 'refused band-taken', 'two.fits': 'imaged' })
    expect(await bandsOf('SWS1')).toEqual(['g one.fits 2', 'i three.fits 6', 'r two.fits 3'])
  })
})

describe('the same bytes under another name', () => {
  it('are read where the name tells another candidate or band, such as empty cutouts', async () => {
    const empty = cutoutFits({ seed: 7, position: null })
    for (const name of ['SWS1_g', 'SWS1_r', 'SWS2_g']) await intake.deliver(`${name}.fits`, empty)
    await intake.read()
    expect(Object.values(await intake.fates())).toEqual(['imaged', 'imaged', 'imaged'])
    expect((await candidates()).map(({ name }) => name)).toEqual(['SWS1', 'SWS2'])
  })

  it('are a duplicate where the name tells the same place, or none', async () => {
    const bytes = cutoutFits({ seed: 1 })
    await intake.deliver('SWS1_g.fits', bytes)
    expect((await intake.deliver('all/SWS1_g.fits', bytes)).fate).toBe('duplicate')
    await intake.read()
    expect((await intake.deliver('copy_of_the_first.fits', bytes)).fate).toBe('duplicate')
  })

  it('are read when a manifest comes that tells another candidate', async () => {
    const empty = cutoutFits({ seed: 7, position: null })
    await intake.deliver('SWS1_g.fits', empty)
    expect((await intake.deliver('second.fits', empty)).fate).toBe('duplicate')
    await intake.deliver('list.csv', 'file,candidate,band\nsecond.fits,SWS2,g\n')
    await intake.read()
    expect(await bandsOf('SWS2')).toEqual(['g second.fits 2'])
  })
})
