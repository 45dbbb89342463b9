import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { readFits } from '@/lib/science/fits/read-fits'
import { withoutFill } from './without-fill'

const WIDTH = 40
const HEIGHT = 30

function sky(step = 0): Float32Array {
  const random = new SeededRandom(8)
  return Float32Array.from({ length: WIDTH * HEIGHT }, () => {
    const value = 3 + random.normal()
    return step > 0 ? step * Math.round(value / step) : value
  })
}

function fill(data: Float32Array, value: number, width: number, height: number): Float32Array {
  return data.map((own, i) => (i % WIDTH < width && Math.floor(i / WIDTH) < height ? value : own))
}

const missing = (data: Float32Array): number => data.filter((value) => value !== value).length

describe('pixels that a pipeline has filled with one number', () => {
  it.each([0, -999, -32768, 3])('become no data, and no others do: %s', (value) => {
    const data = fill(sky(), value, 12, HEIGHT)
    const cleared = withoutFill(data, WIDTH, HEIGHT)
    expect(missing(cleared)).toBe(12 * HEIGHT)
    cleared.forEach((own, i) => expect(own).toBe(i % WIDTH < 12 ? Number.NaN : data[i]))
  })

  it('become no data where there are two such numbers', () => {
    const data = fill(fill(sky(), 0, 12, HEIGHT), 3, 12, 10)
    expect(missing(withoutFill(data, WIDTH, HEIGHT))).toBe(12 * HEIGHT)
  })

  it('stay where they make no square of five, as single dead rows and pixels', () => {
    const data = fill(sky(), 0, WIDTH, 4)
    expect(withoutFill(data, WIDTH, HEIGHT)).toBe(data)
  })

  it('are not mistaken for sky that is rounded coarsely', () => {
    const data = sky(1)
    expect(withoutFill(data, WIDTH, HEIGHT)).toBe(data)
  })

  it('are not mistaken for a saturated core', () => {
    const data = sky().map((own, i) => (Math.hypot((i % WIDTH) - 20, Math.floor(i / WIDTH) - 15) < 5 ? 5000 : own))
    expect(missing(withoutFill(data, WIDTH, HEIGHT))).toBe(0)
  })

  it('stay where there is nothing else', () => {
    const data = new Float32Array(WIDTH * HEIGHT)
    expect(withoutFill(data, WIDTH, HEIGHT)).toBe(data)
    const half = data.map((_, i) => (i < 600 ? Number.NaN : 7))
    expect(withoutFill(half, WIDTH, HEIGHT)).toBe(half)
  })

  it('are told from the flat blocks that lossy compression leaves in true sky', async () => {
    const data = await compressed('hcompress_flat_blocks')
    expect(missing(withoutFill(data, 80, 80))).toBe(0)
  })

  it('are found beside such blocks where they are far darker than the sky, and nothing else is', async () => {
    const data = await compressed('hcompress_flat_blocks_filled')
    const cleared = withoutFill(data, 80, 80)
    expect(missing(cleared)).toBeGreaterThan(0.5 * 14 * 80)
    cleared.forEach((own, i) => expect(own).toBe(own !== own && i % 80 < 14 ? Number.NaN : data[i]))
  })
})

/** Made by astropy: fixtures/fits/README.md. */
async function compressed(name: string): Promise<Float32Array> {
  const { images } = await readFits(readFileSync(`fixtures/fits/extra/${name}.fits.fz`))
  return images[0].planes[0]
}
