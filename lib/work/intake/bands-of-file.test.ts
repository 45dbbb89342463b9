import { describe, expect, it } from 'vitest'
import { readFits } from '@/lib/science/fits/read-fits'
import { writeFits, type WriteFitsOptions } from '@/lib/science/fits/write-fits'
import { cutoutImage, type CutoutOptions } from '@/tests/_support/cutouts'
import { bandsOfFile } from './bands-of-file'

const GRI = ['g', 'r', 'i']

async function found(images: Omit<CutoutOptions, 'seed'>[], told: string | null = null, options?: WriteFitsOptions) {
  const bytes = writeFits(
    images.map((image, index) => cutoutImage({ seed: index + 1, ...image })),
    options,
  )
  const result = bandsOfFile(await readFits(bytes), told, GRI, 'x.fits')
  if ('refusal' in result) return result.refusal
  return {
    bands: result.places.map(({ band, image, planeIndex }) => `${band} ${image.hdu} ${planeIndex}`),
    notes: result.notes,
  }
}

const filter = (value: string) => ({ header: [{ keyword: 'FILTER', value }] })

describe('the bands in a file', () => {
  it('is the one that the name told, whatever the header says', async () => {
    expect(await found([filter('i')], 'g')).toEqual({ bands: ['g 0 0'], notes: [] })
  })

  it('is the one of FILTER when the name told none', async () => {
    expect(await found([filter('HSC-R')])).toEqual({ bands: ['r 0 0'], notes: [] })
  })

  it('is refused with what the header says when that names no band', async () => {
    const refusal = await found([filter('z.MP9801')])
    expect(refusal).toMatchObject({ fault: 'no-band' })
    expect(refusal).toHaveProperty('reason', expect.stringMatching(/FILTER = 'z.MP9801'.*g, r, i.*manifest/))
  })

  it('are told by EXTNAME before FILTER, in any order', async () => {
    const images = [
      { extname: 'I', ...filter('g') },
      { extname: 'SCI_G', ...filter('g') },
      { extname: 'band r', ...filter('g') },
    ]
    expect(await found(images)).toEqual({ bands: ['i 1 0', 'g 2 0', 'r 3 0'], notes: [] })
  })

  it('are told by the filter of each extension when EXTNAME tells none', async () => {
    expect(await found([filter('r'), filter('g')])).toEqual({ bands: ['r 1 0', 'g 2 0'], notes: [] })
  })

  it('stand in the campaign\u2019s order when nothing names them and the counts agree', async () => {
    expect(await found([{}, {}, {}])).toEqual({ bands: ['g 1 0', 'r 2 0', 'i 3 0'], notes: [] })
  })

  it('are refused when nothing names them and the counts differ', async () => {
    expect(await found([{}, {}])).toMatchObject({ fault: 'no-band' })
  })

  it('leave weights and masks aside', async () => {
    expect(await found([{ extname: 'SCI' }, { extname: 'WHT' }, { extname: 'MASK_G' }], 'g')).toEqual({
      bands: ['g 1 0'],
      notes: [],
    })
  })

  it('name what is not used of a file with more images than bands', async () => {
    expect(await found([{ extname: 'g' }, { extname: 'G' }, { extname: 'other' }])).toEqual({
      bands: ['g 1 0'],
      notes: ['G is a second image of band g and is not used.', 'other names no band and is not used.'],
    })
  })

  it('are the planes of a cube in the campaign\u2019s order', async () => {
    expect(await found([{}, {}, {}], null, { several: 'cube' })).toEqual({
      bands: ['g 0 0', 'r 0 1', 'i 0 2'],
      notes: [],
    })
  })

  it('are the planes of a cube as BANDS names them', async () => {
    const cube = [{ header: [{ keyword: 'BANDS', value: 'i,r' }] }, {}]
    expect(await found(cube, null, { several: 'cube' })).toEqual({ bands: ['i 0 0', 'r 0 1'], notes: [] })
  })

  it('are refused for a cube of another number of planes', async () => {
    expect(await found([{}, {}], null, { several: 'cube' })).toMatchObject({
      fault: 'no-band',
      reason: expect.stringContaining('2 planes'),
    })
  })

  it('are refused for a cube under a name that says one band', async () => {
    expect(await found([{}, {}, {}], 'g', { several: 'cube' })).toMatchObject({ fault: 'no-band' })
  })
})
