import sharp from 'sharp'
import { describe, expect, it } from 'vitest'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { encodePng } from './encode-png'

const noise = (size: number, seed: number): Uint8Array => {
  const random = new SeededRandom(seed)
  return Uint8Array.from({ length: size }, () => Math.floor(random.uniform() * 256))
}

// The second reader is libspng inside sharp, which checks every chunk's CRC and zlib's checksum.
async function readBack(png: Uint8Array, channels: 1 | 3) {
  const image =
    channels === 1 ? sharp(png, { failOn: 'warning' }).toColourspace('b-w') : sharp(png, { failOn: 'warning' })
  return image.raw().toBuffer({ resolveWithObject: true })
}

describe('a picture as PNG', () => {
  it.each([
    { width: 80, height: 80, channels: 3 as const },
    { width: 80, height: 80, channels: 1 as const },
    { width: 1, height: 1, channels: 3 as const },
    { width: 1, height: 7, channels: 1 as const },
    { width: 301, height: 2, channels: 3 as const },
    { width: 13, height: 200, channels: 1 as const },
  ])('comes back pixel by pixel at $width x $height x $channels', async ({ width, height, channels }) => {
    const pixels = noise(width * height * channels, width + height)
    const { data, info } = await readBack(encodePng({ pixels, width, height, channels }), channels)
    expect(info).toMatchObject({ width, height, channels })
    expect(new Uint8Array(data)).toEqual(pixels)
  })

  it('does not depend on the picture before it', () => {
    const large = { pixels: noise(90 * 90 * 3, 1), width: 90, height: 90, channels: 3 as const }
    const small = { pixels: noise(30 * 20, 2), width: 30, height: 20, channels: 1 as const }
    const first = encodePng(small)
    encodePng(large)
    expect(encodePng(small)).toEqual(first)
  })

  it('is smaller than its pixels where they are smooth', () => {
    const pixels = Uint8Array.from({ length: 6400 }, (_, i) => (i % 80) + Math.floor(i / 80))
    expect(encodePng({ pixels, width: 80, height: 80, channels: 1 }).length).toBeLessThan(1000)
  })

  it('refuses pixels that do not fill the picture, and a picture without pixels', () => {
    expect(() => encodePng({ pixels: new Uint8Array(5), width: 2, height: 2, channels: 1 })).toThrow(RangeError)
    expect(() => encodePng({ pixels: new Uint8Array(0), width: 0, height: 2, channels: 1 })).toThrow(RangeError)
  })
})
