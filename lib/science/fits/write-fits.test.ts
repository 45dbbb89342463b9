import { execFileSync, spawnSync } from 'node:child_process'
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { readFits } from '@/lib/science/fits/read-fits'
import { writeCard, type FitsCard } from '@/lib/science/fits/write-card'
import { writeFits, type ImageToWrite } from '@/lib/science/fits/write-fits'

const cards: FitsCard[] = [
  { keyword: 'OBJECT', value: "SWS 'twin' arc", comment: 'name of the candidate' },
  { keyword: 'FILTER', value: 'g' },
  { keyword: 'CTYPE1', value: 'RA---TAN' },
  { keyword: 'CTYPE2', value: 'DEC--TAN' },
  { keyword: 'CRPIX1', value: 4.5 },
  { keyword: 'CRPIX2', value: 4.5 },
  { keyword: 'CRVAL1', value: 150.00000000000003, comment: 'degrees' },
  { keyword: 'CRVAL2', value: -2 },
  { keyword: 'CDELT1', value: -4.5e-5 },
  { keyword: 'CDELT2', value: 4.5e-5 },
  { keyword: 'TINY', value: 1e-300 },
  { keyword: 'HUGE', value: 1e21 },
  { keyword: 'DEMO', value: true },
  { keyword: 'COMMENT', value: 'made by a simulator' },
]

function image(width: number, height: number, extname?: string): ImageToWrite {
  const data = Float32Array.from({ length: width * height }, (_, i) => (i === 7 ? NaN : (i - 5) * 1.1e-13))
  return { header: cards, width, height, data, extname }
}

describe('writeFits', () => {
  it('writes one image as the primary image, which reads back bit by bit', async () => {
    const written = image(37, 11, 'g')
    const { images } = await readFits(writeFits([written]))
    expect(images).toHaveLength(1)
    expect(images[0]).toMatchObject({ hdu: 0, extname: 'g', width: 37, height: 11, planes: [written.data] })
    const values = cards.filter(({ keyword }) => keyword !== 'COMMENT').map(({ keyword, value }) => [keyword, value])
    expect(images[0].header).toMatchObject(Object.fromEntries(values))
  })

  it('writes several images as extensions with their names', async () => {
    const written = [image(37, 11, 'g'), image(20, 30, 'r')]
    const { images } = await readFits(writeFits(written))
    expect(images.map(({ hdu, extname, planes }) => ({ hdu, extname, data: planes[0] }))).toEqual([
      { hdu: 1, extname: 'g', data: written[0].data },
      { hdu: 2, extname: 'r', data: written[1].data },
    ])
  })

  it('writes several images as a cube, in their order', async () => {
    const written = [image(8, 8), { ...image(8, 8), data: new Float32Array(64).fill(2) }]
    const { images } = await readFits(writeFits(written, { several: 'cube' }))
    expect(images[0].planes).toEqual(written.map(({ data }) => data))
  })

  it.each([
    ['no image', () => writeFits([]), 'at least one image'],
    ['data of another size', () => writeFits([{ ...image(8, 8), width: 9 }]), '9 x 8'],
    [
      'cube planes of two sizes',
      () => writeFits([image(8, 8), image(8, 9)], { several: 'cube' }),
      'same width and height',
    ],
    ['a structural card', () => writeFits([{ ...image(8, 8), header: [{ keyword: 'NAXIS1', value: 3 }] }]), 'NAXIS1'],
  ])('refuses %s', (_, call, words) => {
    expect(call).toThrow(RangeError)
    expect(call).toThrow(words)
  })
})

describe('writeCard', () => {
  // FITS Standard 4.0, 4.2: values right-justified to column 30, strings from column 11, closed at column 20 or later.
  it.each([
    [{ keyword: 'NAXIS', value: 2 }, 'NAXIS   =                    2'],
    [{ keyword: 'SIMPLE', value: true, comment: 'yes' }, 'SIMPLE  =                    T / yes'],
    [{ keyword: 'FILTER', value: 'g' }, "FILTER  = 'g       '          "],
    [{ keyword: 'OBJECT', value: "O'Neill" }, "OBJECT  = 'O''Neill'          "],
    [{ keyword: 'CD1_1', value: -4.5e-7 }, 'CD1_1   =              -4.5E-7'],
    [{ keyword: 'ZERO', value: -0 }, 'ZERO    =                    0'],
  ])('writes %j', (card, text) => {
    expect(writeCard(card)).toBe(text.padEnd(80))
  })

  it.each([
    [{ keyword: 'lower', value: 1 }, 'no FITS keyword'],
    [{ keyword: 'NINELONGX', value: 1 }, 'no FITS keyword'],
    [{ keyword: 'A', value: NaN }, 'finite numbers'],
    [{ keyword: 'A', value: 'x'.repeat(69) }, 'a card holds 68'],
    [{ keyword: 'A', value: 'Å' }, 'printable ASCII'],
    [{ keyword: 'COMMENT', value: 'x'.repeat(73) }, '72 characters'],
  ])('refuses %j', (card, words) => {
    expect(() => writeCard(card)).toThrow(words)
  })
})

// The judges: fitsverify 4.20 and astropy 5.2.1, as Debian ships them. Without them these tests are skipped, never passed.
const python = ['python3', '/usr/bin/python3'].find(
  (name) => spawnSync(name, ['-c', 'import astropy.io.fits']).status === 0,
)
const hasFitsverify = spawnSync('fitsverify', ['-h']).error === undefined

describe('writeFits before other readers', () => {
  let folder: string
  const path = (name: string) => join(folder, name)
  beforeAll(() => {
    folder = mkdtempSync(join(tmpdir(), 'write-fits-'))
    writeFileSync(path('one.fits'), writeFits([image(37, 11, 'g')]))
    writeFileSync(path('three.fits'), writeFits([image(37, 11, 'g'), image(37, 11, 'r'), image(37, 11, 'i')]))
    writeFileSync(path('cube.fits'), writeFits([image(37, 11), image(37, 11)], { several: 'cube' }))
  })
  afterAll(() => rmSync(folder, { recursive: true }))

  it.skipIf(!hasFitsverify).each(['one.fits', 'three.fits', 'cube.fits'])(
    'passes fitsverify without a warning: %s',
    (name) => {
      const { stdout } = spawnSync('fitsverify', ['-q', path(name)], { encoding: 'utf8' })
      expect(stdout).toMatch(/^verification OK/)
    },
  )

  it.skipIf(python === undefined)('gives astropy the same pixels and values', () => {
    const script = `
import json, sys
from astropy.io import fits
with fits.open(sys.argv[1]) as f:
    f.verify('exception')
    h = f[1].header
    print(json.dumps([[x.name for x in f], list(f[2].data.shape), f[2].data.dtype.str, float(f[3].data[2, 5]), bool(f[1].data[0, 7] != f[1].data[0, 7]),
      h['OBJECT'], h['CRVAL1'], h['TINY'], h['HUGE'], h['DEMO'], str(h['COMMENT'])]))`
    const answer: unknown = JSON.parse(execFileSync(python!, ['-c', script, path('three.fits')], { encoding: 'utf8' }))
    const pixel = Math.fround((2 * 37 + 5 - 5) * 1.1e-13)
    expect(answer).toEqual([
      ['PRIMARY', 'g', 'r', 'i'],
      [11, 37],
      '>f4',
      pixel,
      true,
      "SWS 'twin' arc",
      150.00000000000003,
      1e-300,
      1e21,
      true,
      'made by a simulator',
    ])
  })
})
