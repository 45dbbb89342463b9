import { readFileSync, readdirSync } from 'node:fs'
import { expect, it } from 'vitest'
import { readFits } from '@/lib/science/fits/read-fits'
import { faultOfFirstBytes } from './first-bytes'

const FOLDER = 'fixtures/fits'
const names = readdirSync(FOLDER).filter((name) => /\.(fits|fz|gz)$/.test(name))
const bytesOf = (name: string) => new Uint8Array(readFileSync(`${FOLDER}/${name}`))

it.each([
  ['bad_text.fits', /^This is not a FITS file: it begins with/],
  ['bad_png.fits', /^The file is a PNG picture/],
  ['bad_one_byte.fits', /cut off/],
  ['bad_trunc_header.fits', /cut off/],
])('tells of %s before it is sent that it will be refused', async (name, sentence) => {
  expect(await faultOfFirstBytes(new Blob([bytesOf(name)]))).toMatch(sentence)
})

it('finds no fault with any file that can be read', async () => {
  let refused = 0
  for (const name of names) {
    const bytes = bytesOf(name)
    if ((await faultOfFirstBytes(new Blob([bytes]))) === null) continue
    await expect(readFits(bytes), name).rejects.toThrow()
    refused++
  }
  expect(refused).toBeGreaterThan(5)
})

it('leaves empty files to be told as such, and packed ones to the server', async () => {
  expect(await faultOfFirstBytes(new Blob([]))).toBeNull()
  expect(await faultOfFirstBytes(new Blob([bytesOf('g_f32.fits.gz')]))).toBeNull()
})
