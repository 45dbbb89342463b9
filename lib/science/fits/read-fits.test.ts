import { readFileSync } from 'node:fs'
import { gzipSync } from 'node:zlib'
import { describe, expect, it } from 'vitest'
import { FitsError, type FitsFault, type FitsFile } from '@/lib/science/fits/fits-types'
import { readFits } from '@/lib/science/fits/read-fits'

// Expected values: fixtures/fits/expected.json (astropy 5.2.1, for tile-compressed files with blanks funpack 4.2.0).
interface Statistics {
  nan_count: number
  inf_count: number
  sum: number | string
  min: number | string
  max: number | string
  pixels: { x: number; y: number; value: number | string }[]
}
interface Expected extends Statistics {
  hdu_to_use: number
  naxis_fits_order: number[]
  hdus: { index: number; type: string; extname: string }[]
  planes?: Statistics[]
  bands?: (Statistics & { hdu: number; extname: string })[]
  exact_float64?: Statistics
}
const FOLDER = 'fixtures/fits'
const { good, bad } = JSON.parse(readFileSync(`${FOLDER}/expected.json`, 'utf8')) as {
  good: Record<string, Expected>
  bad: Record<string, { an_application_should: string }>
}
const load = (name: string) => new Uint8Array(readFileSync(`${FOLDER}/${name}`))
const read = (name: string) => readFits(load(name))

async function refusal(bytes: Uint8Array, limits?: Parameters<typeof readFits>[1]): Promise<FitsError> {
  const outcome: unknown = await readFits(bytes, limits).catch((error: unknown) => error)
  expect(outcome).toBeInstanceOf(FitsError)
  return outcome as FitsError
}

/** float32 keeps 24 bits: 6e-8 relative for a pixel. The sum of rounded pixels is off by less than 1e-7 of the largest times their number. */
function expectPlane(plane: Float32Array, width: number, expected: Statistics) {
  let [nan, infinite, sum, min, max] = [0, 0, 0, Infinity, -Infinity]
  for (const value of plane) {
    if (Number.isNaN(value)) nan++
    else if (!Number.isFinite(value)) infinite++
    else [sum, min, max] = [sum + value, Math.min(min, value), Math.max(max, value)]
  }
  expect({ nan, infinite }).toEqual({ nan: expected.nan_count, infinite: expected.inf_count })
  const largest = Math.max(Math.abs(Number(expected.min)), Math.abs(Number(expected.max)))
  expect(Math.abs(sum - Number(expected.sum))).toBeLessThanOrEqual(1e-7 * largest * plane.length)
  for (const [value, wanted] of [[min, Number(expected.min)] as const, [max, Number(expected.max)] as const]) {
    expect(Math.abs(value - wanted)).toBeLessThanOrEqual(6e-8 * Math.abs(wanted))
  }
  for (const { x, y, value } of expected.pixels)
    expect(plane[y * width + x], `pixel ${x},${y}`).toBe(Math.fround(Number(value)))
}

describe('readFits on good files', () => {
  it.each(Object.keys(good))('reads %s as astropy does', async (name) => {
    const expected = good[name]
    const file = await read(name)
    const image = file.images.find(({ hdu }) => hdu === expected.hdu_to_use)
    expect(image).toBeDefined()
    const { width, height, planes } = image!
    expect([width, height]).toEqual(expected.naxis_fits_order.slice(0, 2))
    expect(planes.every((plane) => plane.length === width * height)).toBe(true)
    const wanted = expected.planes ?? [expected.exact_float64 ?? expected]
    expect(planes).toHaveLength(wanted.length)
    wanted.forEach((statistics, index) => expectPlane(planes[index], width, statistics))
    for (const band of expected.bands ?? []) {
      const found = file.images.find(({ hdu }) => hdu === band.hdu)!
      expect(found.extname).toBe(band.extname)
      expectPlane(found.planes[0], found.width, band)
    }
    const pictures = expected.hdus.filter(
      ({ type }) => type !== 'BinTableHDU' && !(type === 'PrimaryHDU' && expected.hdu_to_use > 0),
    )
    expect(file.images.map(({ hdu }) => hdu)).toEqual(pictures.map(({ index }) => index))
  })

  it('gives the header of the image that was compressed, without the table around it', async () => {
    const { header, extname } = (await read('p_rice_f32_dither2.fits.fz')).images[0]
    expect(header).toMatchObject({ BITPIX: -32, NAXIS: 2, NAXIS1: 64, NAXIS2: 48, OBJECT: 'REFSCENE' })
    expect(Object.keys(header).filter((keyword) => /^(Z|T|XTENSION|PCOUNT)/.test(keyword))).toEqual([])
    expect(extname).toBeNull()
  })

  it('reads odd but legal header cards', async () => {
    const { header } = (await read('g_odd_header.fits')).images[0]
    expect(header).toMatchObject({
      EXPTIME: 1500,
      FREEFMT: 42,
      MYFLOAT: -0.005,
      TRAILSP: 'abc',
      OBJECT: "REF'SCENE",
      'A_-9': false,
      COMPLX: '(1.0, -2.5D0)',
      DUP: 1,
    })
    expect(header).not.toHaveProperty('COMMENT')
  })

  it('reads the image beside header bytes that FITS does not allow, and shows them as question marks', async () => {
    const { header, planes } = (await read('bad_nonascii_header.fits')).images[0]
    expect(planes[0]).toHaveLength(64 * 48)
    for (const value of Object.values(header)) expect(String(value)).toMatch(/^[\x20-\x7e]*$/)
    expect(JSON.stringify(header)).toContain('?')
  })

  it('passes over records after the last unit, which may hold anything', async () => {
    const bytes = load('g_f32.fits')
    const longer = new Uint8Array(bytes.length + 2880).fill(0x41)
    longer.set(bytes)
    expect((await readFits(longer)).images[0].planes).toEqual((await readFits(bytes)).images[0].planes)
  })

  it('reads bytes that begin anywhere in a larger buffer', async () => {
    const bytes = load('g_f32.fits')
    const larger = new Uint8Array(bytes.length + 3)
    larger.set(bytes, 3)
    expect((await readFits(larger.subarray(3))).images[0].planes).toEqual((await readFits(bytes)).images[0].planes)
  })

  it('can be sent to another thread', async () => {
    const file = await read('g_multi_gri.fits')
    expect(structuredClone(file)).toEqual(file)
  })
})

const FAULTS: Record<string, FitsFault> = {
  'bad_zero_length.fits': 'empty',
  'bad_one_byte.fits': 'truncated-header',
  'bad_trunc_header.fits': 'truncated-header',
  'bad_trunc_header_2880.fits': 'truncated-header',
  'bad_trunc_data.fits': 'truncated-data',
  'bad_header_only.fits': 'truncated-data',
  'bad_naxis0.fits': 'no-image',
  'bad_naxis1.fits': 'no-image',
  'bad_table_only.fits': 'no-image',
  'bad_naxis_zero_axis.fits': 'no-image',
  'bad_naxis_1e9.fits': 'too-large',
  'bad_naxis_2p31.fits': 'too-large',
  'bad_naxis_999.fits': 'bad-header',
  'bad_naxis_negative.fits': 'bad-header',
  'bad_naxis_missing2.fits': 'bad-header',
  'bad_naxis_string.fits': 'bad-header',
  'bad_naxis_float.fits': 'bad-header',
  'bad_bitpix_7.fits': 'bad-header',
  'bad_bitpix_missing.fits': 'bad-header',
  'bad_bzero_nan.fits': 'bad-header',
  'bad_simple_F.fits': 'bad-header',
  'bad_text.fits': 'not-fits',
  'bad_text_simple.fits': 'not-fits',
  'bad_png.fits': 'not-fits',
  'bad_html.fits': 'not-fits',
  'bad_gz_truncated.fits.gz': 'corrupt-compression',
  'bad_gz_crc.fits.gz': 'corrupt-compression',
  'bad_bomb_268MB.fits.gz': 'too-large',
  'bad_bomb_268MB.fits.bz2': 'unsupported',
  'bad_bomb_tiles.fits.fz': 'too-large',
  'bad_fz_corrupt_rice.fits.fz': 'corrupt-compression',
  'bad_fz_heap_offset.fits.fz': 'corrupt-compression',
  'bad_zip_traversal.zip': 'unsupported',
  'bad_zip_bomb.zip': 'unsupported',
}

describe('readFits on bad files', () => {
  it('knows every bad file of the corpus', () => {
    const readable = ['bad_nonascii_header.fits', 'bad_bomb_10KB.fits.gz'] // by the corpus' own advice
    expect(Object.keys(FAULTS).concat(readable).sort()).toEqual(Object.keys(bad).sort())
  })

  it.each(Object.entries(FAULTS))('refuses %s as %s', async (name, fault) => {
    const error = await refusal(load(name))
    expect(error.fault).toBe(fault)
    expect(error.message).toMatch(/^[\x20-\x7e]{20,300}$/)
    expect(error.message).toMatch(/\.$/)
  })

  it.each([
    ['bad_naxis_negative.fits', 'NAXIS1 = -64'],
    ['bad_bitpix_7.fits', 'BITPIX = 7'],
    ['bad_bzero_nan.fits', 'BSCALE = NaN'],
    ['bad_naxis_missing2.fits', 'no NAXIS2'],
    ['bad_trunc_data.fits', '12288 bytes of data, but only 5000 are present'],
    ['bad_naxis_1e9.fits', '1000000000 x 1000000000 pixels'],
    ['bad_table_only.fits', 'HDU 1 is a table'],
    ['bad_fz_heap_offset.fits.fz', 'offset 100000000'],
  ])('says what is wrong with %s', async (name, words) => {
    expect((await refusal(load(name))).message).toContain(words)
  })

  it('reads a highly compressed image within the limits, and refuses it beyond them', async () => {
    const bomb = load('bad_bomb_10KB.fits.gz')
    expect((await readFits(bomb)).images[0]).toMatchObject({ width: 3200, height: 3200 })
    expect((await refusal(bomb, { maxBytes: 1e9, maxPixels: 1e6 })).fault).toBe('too-large')
    expect((await refusal(bomb, { maxBytes: 1e6, maxPixels: 1e9 })).message).toContain('more than the 1000000 bytes')
  })

  it('counts the pixels of all images of a file together', async () => {
    const limits = { maxBytes: 1e6, maxPixels: 3 * 20 * 32 }
    expect((await readFits(load('g_multi_gri.fits'), limits)).images).toHaveLength(3)
    expect((await refusal(load('g_multi_gri.fits'), { ...limits, maxPixels: limits.maxPixels - 1 })).fault).toBe(
      'too-large',
    )
  })

  it('refuses a gzip file inside a gzip file', async () => {
    expect((await refusal(gzipSync(gzipSync(load('g_f32.fits'))))).message).toContain('gzip-compressed twice')
  })
})

describe('readFits on changed headers', () => {
  const card = (keyword: string, value: string) => `${keyword.padEnd(8)}= ${value.padStart(20)}`.padEnd(80)
  /** The file with `text` written over the first place where `replaced` stands; cards are added over END. */
  function withCard(name: string, replaced: string, text: string): Uint8Array {
    const bytes = load(name).slice()
    const at = new TextDecoder('latin1').decode(bytes).indexOf(replaced)
    expect(at, `${replaced} in ${name}`).toBeGreaterThan(0)
    bytes.set(new TextEncoder().encode(text), at)
    return bytes
  }

  it.each([
    [
      'PCOUNT and GCOUNT that do not fit an image',
      withCard('g_f32.fits', 'END     ', card('GCOUNT', '0') + 'END'.padEnd(80)),
      'bad-header',
    ],
    ['BSCALE = 0', withCard('g_f32.fits', 'END     ', card('BSCALE', '0') + 'END'.padEnd(80)), 'bad-header'],
    [
      'an unknown tile compression',
      withCard('p_rice_i16.fits.fz', "ZCMPTYPE= 'RICE_1  '", "ZCMPTYPE= 'NOVEL_9 '"),
      'unsupported',
    ],
    [
      'an unknown quantisation',
      withCard('p_rice_f32_dither2.fits.fz', "ZQUANTIZ= 'SUBTRACTIVE_DITHER_2'", "ZQUANTIZ= 'SUBTRACTIVE_DITHER_9'"),
      'unsupported',
    ],
    [
      'tiles that do not cover the image',
      withCard('p_rice_i16.fits.fz', card('ZTILE2', '1').slice(0, 30), card('ZTILE2', '2').slice(0, 30)),
      'bad-header',
    ],
    ['a table narrower than its columns', withCard('p_rice_i16.fits.fz', "'1PB(", "'1QB("), 'bad-header'],
    [
      'a Rice block size of 0',
      withCard('p_rice_i16.fits.fz', card('ZVAL1', '32').slice(0, 30), card('ZVAL1', '0').slice(0, 30)),
      'corrupt-compression',
    ],
  ] as const)('refuses %s', async (_, bytes, fault) => {
    expect((await refusal(bytes)).fault).toBe(fault)
  })

  it('reads a long string that goes on over CONTINUE cards, and HIERARCH keywords', async () => {
    const cards = [
      `LONGTEXT= 'first half, &'`,
      `CONTINUE  'second half'   / comment`,
      `HIERARCH ESO DET NAME = 'chip 7' / detector`,
      'END',
    ]
    const bytes = withCard('g_f32.fits', 'END     ', cards.map((text) => text.padEnd(80)).join(''))
    const file: FitsFile = await readFits(bytes)
    expect(file.primary).toMatchObject({ LONGTEXT: 'first half, second half', 'ESO DET NAME': 'chip 7' })
  })
})
