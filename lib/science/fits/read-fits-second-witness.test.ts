import { readFileSync } from 'node:fs'
import path from 'node:path'
import { FITS, type Image } from 'fitsjs-ng'
import { describe, expect, it } from 'vitest'
import { readFits } from './read-fits'

/**
 * A second witness beside astropy's expected values: an independent reader of the npm registry, on every pixel of files that it
 * reads rightly (plain images without BLANK and without 64-bit integers; why it is not used: DEVELOPERS.md).
 */
const FILES = [
  'g_f32.fits',
  'g_f64.fits',
  'g_ext.fits',
  'g_f32_bscale.fits',
  'g_f32_huge_range.fits',
  'g_i32.fits',
  'g_i16_bscale.fits',
  'g_u16.fits',
  'g_i8.fits',
]

describe('readFits', () => {
  it.each(FILES)('gives the same pixels of %s as fitsjs-ng', async (name) => {
    const bytes = readFileSync(path.join('fixtures/fits', name))
    const ours = (await readFits(bytes)).images[0]
    const file = FITS.fromArrayBuffer(bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.byteLength))
    const image = file.hdus.map((hdu) => hdu.data).find((data) => data && 'getFrame' in data) as Image
    const theirs = Float32Array.from(await image.getFrame(0), Number)
    expect([image.width, image.height]).toEqual([ours.width, ours.height])
    expect(ours.planes[0]).toEqual(theirs)
  })
})
