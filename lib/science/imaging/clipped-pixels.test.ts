/** Counts that are exact follow from the pictures made here; that there are no false alarms is measured on simulated cutouts. */
import { describe, expect, it } from 'vitest'
import { SIMULATED_KINDS, simulateCandidate } from '@/lib/science/lensing/simulate-candidate'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { clippedPixels, isClippedNear } from './clipped-pixels'
import { normalisePlane } from './normalise-planes'

const SIDE = 48
const MIDDLE = 24

/** A round star of this width on sky of noise 1, as a detector that cuts at `full` sees it, taken in at twice the pixels where `scale` is 2. */
function star(peak: number, width: number, full = Infinity, scale = 1): Float32Array {
  const random = new SeededRandom(5)
  const side = scale * SIDE
  return Float32Array.from({ length: side * side }, (_, i) => {
    const square = ((i % side) - scale * MIDDLE) ** 2 + (Math.floor(i / side) - scale * MIDDLE) ** 2
    return Math.min(full, peak * Math.exp(square / (-2 * (scale * width) ** 2))) + random.normal()
  })
}

/** Lanczos kernel of order 3 (C. Duchon, J. Appl. Meteorol. 18, 1016, 1979), shifted by a third of a pixel along rows and columns. */
function resampled(data: Float32Array): Float32Array {
  const sinc = (x: number) => (x === 0 ? 1 : Math.sin(Math.PI * x) / (Math.PI * x))
  const taps = [-2, -1, 0, 1, 2, 3].map((k) => sinc(k - 1 / 3) * sinc((k - 1 / 3) / 3))
  const shift = (values: Float32Array, step: number) =>
    values.map((_, i) =>
      taps.reduce(
        (sum, tap, k) => sum + tap * (values[Math.max(0, Math.min(values.length - 1, i + step * (k - 2)))] ?? 0),
        0,
      ),
    )
  return shift(shift(data, 1), SIDE)
}

const clipped = (data: Float32Array, side = SIDE) =>
  clippedPixels(normalisePlane({ band: 'g', width: side, height: side, data }))

describe('a core', () => {
  it('that is cut at one level is found whole, whatever its brightness above the noise allows', () => {
    for (const [peak, full] of [
      [20_000, 8000],
      [2000, 800],
      [600, 200],
    ]) {
      const data = star(peak, 2.5, full)
      const cut = [...data.keys()].filter((i) => Math.abs(data[i] - full) < 6)
      const found = new Set(clipped(data))
      expect(cut.length).toBeGreaterThan(9)
      expect(cut.filter((i) => !found.has(i))).toEqual([])
      expect(found.size).toBeLessThan(2 * cut.length)
    }
  })

  it('that is cut and was resampled since, which puts brighter pixels round the plateau and holes beside them, is found', () => {
    const data = star(60_000, 2, 6000)
    // Charge that ran over along the columns gives the plateau a hard edge.
    for (let row = MIDDLE - 9; row <= MIDDLE + 9; row++)
      data.fill(6000, row * SIDE + MIDDLE - 2, row * SIDE + MIDDLE + 3)
    const rung = resampled(data)
    const most = rung.reduce((largest, value) => Math.max(largest, value), 0)
    const holes = [...rung.keys()].filter((i) => rung[i] < -50)
    expect(most).toBeGreaterThan(1.05 * 6000)
    expect(holes.length).toBeGreaterThan(4)
    const found = new Set(clipped(rung))
    expect(holes.filter((i) => !found.has(i))).toEqual([])
    expect(found.has(MIDDLE * SIDE + MIDDLE)).toBe(true)
  })

  it('whose counts wrapped to below the sky is found at the wrapped pixels', () => {
    const data = star(3000, 2).map((value) => (value > 2500 ? value - 4096 : value))
    const wrapped = [...data.keys()].filter((i) => data[i] < -100)
    expect(wrapped.length).toBeGreaterThan(2)
    expect(clipped(data)).toEqual(expect.arrayContaining(wrapped))
  })

  it.each([1.2, 2, 4, 6, 9])('that comes to a point, %s pixels wide, is not clipped', (width) => {
    for (const peak of [50, 200, 1000, 20_000]) expect(clipped(star(peak, width, Infinity, 2), 2 * SIDE)).toEqual([])
  })

  it('is not looked for where there is no data', () => {
    const data = star(20_000, 2.5, 8000)
    const whole = clipped(data)
    data.fill(Number.NaN, whole[0], whole[0] + 1)
    expect(clipped(data)).toEqual(whole.slice(1))
    expect(clipped(new Float32Array(SIDE * SIDE).fill(Number.NaN))).toEqual([])
  })
})

describe('dark pixels', () => {
  it('far from any light are no sign of a clipped core', () => {
    const data = star(1000, 2)
    data[5 * SIDE + 5] = -500
    expect(clipped(data)).toEqual([])
  })
})

describe.each(SIMULATED_KINDS)('of %s', (kind) => {
  // The simulator cuts its bright stars as a detector does.
  const isCut = kind === 'star-spikes'

  it(isCut ? 'some bands are clipped' : 'no cutout is taken for a clipped one', () => {
    const found = [0, 1, 2].flatMap((seed) => {
      const { bands, width, height } = simulateCandidate(kind, seed)
      return bands.filter(({ band, data }) => clippedPixels(normalisePlane({ band, width, height, data })).length > 0)
    })
    expect(found.length > 0).toBe(isCut)
  })
})

it('a place is near clipped pixels by columns and rows', () => {
  const plane = { ...normalisePlane({ band: 'g', width: SIDE, height: SIDE, data: star(20_000, 2.5, 8000) }) }
  expect(isClippedNear(plane, MIDDLE + 10, MIDDLE, 8)).toBe(true)
  expect(isClippedNear(plane, MIDDLE + 20, MIDDLE, 8)).toBe(false)
})
