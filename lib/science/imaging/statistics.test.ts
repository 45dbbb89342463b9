import { describe, expect, it } from 'vitest'
import { imageCalled, readReference } from './_fits-fixture'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { clippedStatistics, estimateNoise, medianAbsoluteDeviationSigma } from './statistics'

interface Reference {
  statistics: {
    rows: {
      image: string
      mean: number
      median: number
      std: number
      n_kept: number
      iterations_used: number
      mad_std: number
      plain_median: number
      plain_std_ddof0: number
    }[]
  }
}

const { statistics } = readReference<Reference>()

// astropy 5.2.1, astropy.stats.sigma_clipped_stats and mad_std on the images of fixtures/stretch (doubles).
describe('clipped statistics', () => {
  it.each(statistics.rows)('agree with astropy on $image', (row) => {
    const result = clippedStatistics(imageCalled(row.image))
    expect(result.kept).toBe(row.n_kept)
    expect(result.iterations).toBe(row.iterations_used)
    expect(result.median).toBe(row.median)
    expect(result.mean).toBeCloseTo(row.mean, 10)
    expect(result.std).toBeCloseTo(row.std, 10)
    expect(medianAbsoluteDeviationSigma(imageCalled(row.image))).toBeCloseTo(row.mad_std, 10)
  })

  it('without a round of clipping are the plain ones', () => {
    const row = statistics.rows[0]
    const plain = clippedStatistics(imageCalled(row.image), { maxIterations: 0 })
    expect(plain.median).toBe(row.plain_median)
    expect(plain.std).toBeCloseTo(row.plain_std_ddof0, 10)
  })

  it('of nothing finite are NaN and keep nothing', () => {
    const result = clippedStatistics([Number.NaN, Number.POSITIVE_INFINITY])
    expect(result).toMatchObject({ mean: Number.NaN, median: Number.NaN, std: Number.NaN, kept: 0 })
    expect(medianAbsoluteDeviationSigma([])).toBeNaN()
  })
})

const SIZE = 80

/** Sky 100 with noise 4 and, in the middle, an exponential galaxy of the given peak and scale in pixels. */
function cutout(peak: number, scale: number, seed = 1, unit = 1): Float32Array {
  const random = new SeededRandom(seed)
  return Float32Array.from({ length: SIZE * SIZE }, (_, i) => {
    const radius = Math.hypot((i % SIZE) - 39.5, Math.floor(i / SIZE) - 39.5)
    return unit * (100 + 4 * random.normal() + peak * Math.exp(-radius / scale))
  })
}

// True values are those the cutout was made with; tolerances are several times the scatter over seeds.
describe('the noise of a cutout', () => {
  it.each([
    ['bare sky', 0, 1, 0.1],
    ['a small bright galaxy', 4000, 2, 0.1],
    ['a galaxy whose wings reach the edge', 2000, 4, 0.3],
  ])('is found under %s', (_name, peak, scale, tolerance) => {
    for (const seed of [1, 2, 3, 4, 5]) {
      const { background, sigma, finiteFraction } = estimateNoise(cutout(peak, scale, seed), SIZE, SIZE)
      expect(Math.abs(background - 100)).toBeLessThan(tolerance * 4)
      expect(Math.abs(sigma / 4 - 1)).toBeLessThan(0.06)
      expect(finiteFraction).toBe(1)
    }
  })

  it.each([1e-13, 1e4])('scales with the unit of the pixels, here %s', (unit) => {
    const plain = estimateNoise(cutout(2000, 3), SIZE, SIZE)
    const scaled = estimateNoise(cutout(2000, 3, 1, unit), SIZE, SIZE)
    expect(scaled.sigma / unit / plain.sigma).toBeCloseTo(1, 2)
    expect((scaled.background / unit - plain.background) / plain.sigma).toBeCloseTo(0, 2)
  })

  it('ignores missing pixels and says how many there are', () => {
    const plane = cutout(1000, 3)
    plane.fill(Number.NaN, 0, 1600)
    plane[5000] = Number.POSITIVE_INFINITY
    const { background, sigma, finiteFraction } = estimateNoise(plane, SIZE, SIZE)
    expect(Math.abs(background - 100)).toBeLessThan(0.5)
    expect(Math.abs(sigma / 4 - 1)).toBeLessThan(0.08)
    expect(finiteFraction).toBeCloseTo(1 - 1601 / 6400, 12)
  })

  it('is that of the observed part when most of the cutout is filled with zeros', () => {
    const plane = cutout(0, 1)
    plane.fill(0, 0, 4500)
    const { background, sigma } = estimateNoise(plane, SIZE, SIZE)
    expect(Math.abs(background - 100)).toBeLessThan(1)
    expect(Math.abs(sigma / 4 - 1)).toBeLessThan(0.15)
  })

  it('is 0 only when all pixels are equal or none is finite', () => {
    expect(estimateNoise(new Float32Array(100).fill(7), 10, 10)).toEqual({ background: 7, sigma: 0, finiteFraction: 1 })
    expect(estimateNoise(new Float32Array(4).fill(Number.NaN), 2, 2)).toEqual({
      background: 0,
      sigma: 0,
      finiteFraction: 0,
    })
    const oneHot = new Float32Array(6400)
    oneHot[3000] = 1
    expect(estimateNoise(oneHot, 80, 80).sigma).toBeGreaterThan(0)
    expect(estimateNoise(Float32Array.of(1, 2), 2, 1).sigma).toBeGreaterThan(0)
  })
})
