import { readFileSync } from 'node:fs'
import { gzipSync } from 'node:zlib'
import { describe, expect, it } from 'vitest'
import { readFits } from '@/lib/science/fits/read-fits'
import { ditherOfTile, ditherSequence } from '@/lib/science/fits/tiles/dither'
import { decodeGzipTile } from '@/lib/science/fits/tiles/gzip-tile'
import { decodeHcompress } from '@/lib/science/fits/tiles/hcompress'
import { decodePlio } from '@/lib/science/fits/tiles/plio'
import { decodeRice } from '@/lib/science/fits/tiles/rice'

// Every pixel as astropy 5.2.1 (cfitsio) reads it: fixtures/fits/extra/extra.json. The corpus is tested in read-fits.test.ts.
const FOLDER = 'fixtures/fits/extra'
const { planes: expected } = JSON.parse(readFileSync(`${FOLDER}/extra.json`, 'utf8')) as {
  planes: Record<string, number[][][]>
}

describe('tile-compressed images', () => {
  it.each(Object.keys(expected))('have the pixels that astropy reads, one by one: %s', async (name) => {
    const { images } = await readFits(new Uint8Array(readFileSync(`${FOLDER}/${name}`)))
    expect(images[0].planes).toEqual(expected[name].map((plane) => Float32Array.from(plane.flat())))
  })
})

describe('dithering', () => {
  it('uses the numbers of the standard', () => {
    const random = ditherSequence()
    expect(random).toHaveLength(10000)
    // FITS Standard 4.0, appendix I: the 10000th seed is 1043618065.
    expect(random[9999]).toBe(Math.fround(1043618065 / 2147483647))
    // fixtures/fits/expected.json, compression_notes.first_random_values
    expect([...random.subarray(0, 3)]).toEqual([7.826369255781174e-6, 0.1315377950668335, 0.7556053400039673])
  })

  it('starts each tile at its own place and goes on after the last number', () => {
    const random = ditherSequence()
    const next = ditherOfTile(4, 7) // tile 4 counted from 0, ZDITHER0 = 7: row 10
    const start = Math.floor(random[10] * 500)
    for (let i = start; i < 10000; i++) expect(next()).toBe(random[i])
    expect(next()).toBe(random[Math.floor(random[11] * 500)])
  })
})

describe('decodeRice', () => {
  it('repeats the first value in a block of split 0', () => {
    // 16-bit first value 0x1234, then the 4-bit code 0: all differences are 0.
    expect([...decodeRice(Uint8Array.of(0x12, 0x34, 0x00), 4, 32, 2)]).toEqual([0x1234, 0x1234, 0x1234, 0x1234])
  })

  it.each([
    ['an empty stream', Uint8Array.of(), 32, 4, 'ends before'],
    ['a stream that ends early', Uint8Array.of(0, 0, 0, 1, 0x10), 32, 4, 'ends before'],
    ['an endless run of zeros', new Uint8Array(600).fill(0x20, 1, 2).fill(0xff, 599), 32, 1, 'damaged'],
    ['8-byte pixels', new Uint8Array(99), 32, 8, 'BYTEPIX is 8'],
    ['blocks of no pixels', new Uint8Array(99), 0, 4, 'BLOCKSIZE is 0'],
  ])('refuses %s', (_, bytes, block, width, words) => {
    expect(() => decodeRice(bytes, 8, block, width)).toThrow(words)
  })
})

describe('decodePlio', () => {
  const words = (...list: number[]) => Uint8Array.from(list.flatMap((word) => [(word >> 8) & 0xff, word & 0xff]))
  const header = (instructions: number) => [0, 7, -100, 7 + instructions, 0, 0, 0]

  // Instructions as IRAF's pl_l2p defines them: 4 bits of code, 12 of number.
  it('lays runs of zeros and of the high value', () => {
    const list = words(...header(5), 0x0002, 0x2004, 0x4002, 0x5003, 0x6001)
    expect([...decodePlio(list, 9)]).toEqual([0, 0, 5, 5, 0, 0, 5, 6, 0])
  })

  it.each([
    ['a list longer than its words', words(...header(9), 0x0002), 'cut off'],
    ['runs longer than the tile', words(...header(1), 0x4fff), 'longer than the tile'],
    ['an unknown instruction', words(...header(1), 0x8001), 'unknown instruction 8'],
    ['a negative value', words(...header(1), 0x3002), 'negative'],
  ])('refuses %s', (_, bytes, message) => {
    expect(() => decodePlio(bytes, 9)).toThrow(message)
  })
})

describe('decodeGzipTile', () => {
  it('puts the bytes of GZIP_2 back in order', () => {
    const shuffled = gzipSync(Uint8Array.of(0x01, 0xff, 0x02, 0xfe)) // 0x0102 and 0xfffe, first bytes first
    expect([...decodeGzipTile(shuffled, 2, true, null)]).toEqual([0x0102, -2])
  })

  it.each([
    ['a length that fits no pixel width', gzipSync(new Uint8Array(7)), null],
    ['floats of the wrong width', gzipSync(new Uint8Array(4)), 4 as const],
    ['more than the tile can hold', gzipSync(new Uint8Array(1000)), null],
    ['what is no gzip stream', new Uint8Array(20), null],
  ])('refuses %s', (_, bytes, real) => {
    expect(() => decodeGzipTile(bytes, 2, false, real)).toThrow()
  })
})

describe('decodeHcompress', () => {
  const header = (rows: number, columns: number) => {
    const bytes = new Uint8Array(26)
    const view = new DataView(bytes.buffer)
    view.setUint16(0, 0xdd99)
    view.setInt32(2, rows)
    view.setInt32(6, columns)
    view.setBigInt64(14, 84n)
    return bytes
  }

  it('reads one pixel, and a tile without differences as one value', () => {
    expect([...decodeHcompress(header(1, 1), 1, 1, false)]).toEqual([84])
    // The last step divides by 4: a sum of 84 without differences is four pixels of 21.
    expect([...decodeHcompress(header(2, 2), 2, 2, false)]).toEqual([21, 21, 21, 21])
  })

  it.each([
    ['a short stream', header(2, 2).subarray(0, 20), 'ends before'],
    ['another beginning', header(2, 2).fill(0, 0, 2), 'does not begin'],
    ['a tile of another size', header(30000, 30000), 'not 2 x 2'],
    ['more bit planes than any image has', header(2, 2).fill(200, 22, 25), 'larger than any image'],
  ])('refuses %s', (_, bytes, words) => {
    expect(() => decodeHcompress(bytes, 2, 2, false)).toThrow(words)
  })
})
