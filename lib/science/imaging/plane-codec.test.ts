import { describe, expect, it } from 'vitest'
import { SeededRandom } from '../lensing/seeded-random'
import { decodePlanes, encodePlanes, type PlaneToEncode } from './plane-codec'
import { defaultRecipe } from './recipe'

const RECIPE = defaultRecipe(['g', 'r'])

function noisyPlane(band: string, width: number, height: number, noise: number, background = 0): PlaneToEncode {
  const random = new SeededRandom(width + height)
  const data = Float32Array.from({ length: width * height }, () => background + noise * random.normal())
  return { role: 'band', band, width, height, data, background, noise, pixelScaleArcsec: 0.2 }
}

const roundTrip = (planes: PlaneToEncode[]) => decodePlanes(encodePlanes(planes, RECIPE))

/** The bound that the head of plane-codec.ts gives, with float32 rounding of the data on top. */
function expectWithinBound(plane: PlaneToEncode, values: Float32Array) {
  plane.data.forEach((pixel, i) => {
    const sigma = (pixel - plane.background) / plane.noise
    const bound = (Math.hypot(sigma, 16) / 2048) * 1.001 + 1e-6 * Math.abs(sigma)
    expect(Math.abs(values[i] - sigma)).toBeLessThanOrEqual(bound)
  })
}

describe('planes coded and decoded', () => {
  it.each([1e-13, 1, 1e4])('keep noise of %s resolved within the stated bound', (noise) => {
    const plane = noisyPlane('g', 20, 10, noise, 5 * noise)
    const [decoded] = roundTrip([plane]).planes
    expect(decoded).toMatchObject({ band: 'g', width: 20, height: 10, sigma: noise, state: 'usable', missing: 0 })
    expectWithinBound(plane, decoded.values)
    // One sigma is spread over 64 levels at the sky: two pixels 1/30 sigma apart stay apart.
    const pair = { ...plane, data: Float32Array.of(5 * noise, 5 * noise + noise / 30), width: 2, height: 1 }
    const [dark, bright] = roundTrip([pair]).planes[0].values
    expect(bright).toBeGreaterThan(dark)
  })

  it('keep bright pixels to 0.05 %, far below the sky too', () => {
    const data = Float32Array.of(-3e5, -40, 0, 17.3, 999, 1e6, 3e9, 8e11)
    const plane = { ...noisyPlane('g', 8, 1, 1), data }
    expectWithinBound(plane, roundTrip([plane]).planes[0].values)
  })

  it('hold what is beyond 1e12 sigma at it, so that the noise stays resolved', () => {
    const data = Float32Array.of(-3e38, 0, 1 / 30, 3e38)
    const values = [...roundTrip([{ ...noisyPlane('g', 4, 1, 1), data }]).planes[0].values]
    expect(values[0] / -1e12).toBeCloseTo(1, 3)
    expect(values[3] / 1e12).toBeCloseTo(1, 3)
    expect(values[2]).toBeGreaterThan(values[1])
  })

  it('keep pixels without data as such', () => {
    const data = Float32Array.of(1, Number.NaN, Number.POSITIVE_INFINITY, -2)
    const [plane] = roundTrip([{ ...noisyPlane('g', 2, 2, 1), data }]).planes
    expect([...plane.values].map(Number.isNaN)).toEqual([false, true, true, false])
    expect(plane.missing).toBe(2)
  })

  it('tell planes with nothing to see: constant and empty ones', () => {
    const flat = { ...noisyPlane('g', 2, 2, 0, 7), data: new Float32Array(4).fill(7) }
    const none = { ...noisyPlane('r', 2, 2, 0), data: new Float32Array(4).fill(Number.NaN) }
    const [constant, empty] = roundTrip([flat, none]).planes
    expect(constant).toMatchObject({ state: 'constant', background: 7, sigma: 0 })
    expect([...constant.values]).toEqual([0, 0, 0, 0])
    expect(empty).toMatchObject({ state: 'empty', missing: 4 })
  })

  it('may differ in size, scale and name, and bring their recipe', () => {
    const planes = [noisyPlane('g', 9, 7, 1), { ...noisyPlane('ß', 3, 5, 2), pixelScaleArcsec: null }]
    const decoded = roundTrip(planes)
    expect(decoded.recipe).toEqual(RECIPE)
    expect(
      decoded.planes.map(({ band, width, height, pixelScaleArcsec }) => [band, width, height, pixelScaleArcsec]),
    ).toEqual([
      ['g', 9, 7, 0.2],
      ['ß', 3, 5, null],
    ])
    planes.forEach((plane, k) => expectWithinBound(plane, decoded.planes[k].values))
  })

  it('take two bytes a pixel and a short head', () => {
    expect(encodePlanes([noisyPlane('g', 80, 80, 1)], RECIPE).length).toBeLessThan(2 * 80 * 80 + 2000)
  })
})

describe('bytes that are not whole planes', () => {
  const bytes = encodePlanes([noisyPlane('g', 8, 8, 1)], RECIPE)

  it.each([
    ['nothing', new Uint8Array()],
    ['another file', new TextEncoder().encode('<!doctype html><title>Sign in</title>')],
    ['a cut head', bytes.slice(0, 40)],
    ['cut pixels', bytes.slice(0, -1)],
    ['bytes too many', new Uint8Array([...bytes, 0])],
  ])('are refused with a sentence: %s', (_, damaged) => {
    expect(() => decodePlanes(damaged)).toThrow('The pixels did not arrive whole. Load the page again.')
  })

  it('are refused before coding when the size is wrong', () => {
    expect(() => encodePlanes([{ ...noisyPlane('g', 8, 8, 1), width: 9 }], RECIPE)).toThrow('64 pixels, not 9 x 8')
  })
})
