import { describe, expect, it } from 'vitest'
import { imageCalled, readReference } from './_fits-fixture'
import { asymmetricPercentileInterval, minMaxInterval, percentileInterval, zscale } from './intervals'

interface ZscaleRow {
  image: string
  parameters: {
    n_samples: number
    contrast: number
    max_reject: number
    min_npixels: number
    krej: number
    max_iterations: number
  }
  vmin: number
  vmax: number
}

interface PercentileRow {
  image: string
  percentile?: number
  lower?: number
  upper?: number
  vmin: number
  vmax: number
}

interface Reference {
  zscale: { rows: ZscaleRow[] }
  percentile: { rows: PercentileRow[] }
  minmax_finite: [number, number]
}

const reference = readReference<Reference>()

// astropy 5.2.1 ZScaleInterval; agreement to 1e-9 relative is what its own check by a second implementation reached.
describe('zscale', () => {
  it.each(reference.zscale.rows)(
    'agrees with astropy on $image with $parameters',
    ({ image, parameters, vmin, vmax }) => {
      const { low, high } = zscale(imageCalled(image), {
        samples: parameters.n_samples,
        contrast: parameters.contrast,
        maxReject: parameters.max_reject,
        minPixels: parameters.min_npixels,
        rejectionSigma: parameters.krej,
        maxIterations: parameters.max_iterations,
      })
      expect(Math.abs(low - vmin)).toBeLessThanOrEqual(1e-9 * Math.abs(vmin))
      expect(Math.abs(high - vmax)).toBeLessThanOrEqual(1e-9 * Math.abs(vmax))
    },
  )

  it('of a constant image is that constant, and of nothing finite NaN', () => {
    expect(zscale(new Float32Array(50).fill(3))).toEqual({ low: 3, high: 3 })
    expect(zscale([Number.NaN])).toEqual({ low: Number.NaN, high: Number.NaN })
  })

  it('of too few pixels to fit is their range', () => {
    expect(zscale([5, 1, 3])).toEqual({ low: 1, high: 5 })
  })
})

// numpy.percentile (linear) through astropy 5.2.1; numpy interpolates from the nearer end, hence not bit by bit.
describe('percentile intervals', () => {
  it.each(reference.percentile.rows)('agree with astropy on $image ($percentile, $lower to $upper)', (row) => {
    const values = imageCalled(row.image)
    const { low, high } =
      row.percentile !== undefined
        ? percentileInterval(values, row.percentile)
        : asymmetricPercentileInterval(values, row.lower ?? Number.NaN, row.upper ?? Number.NaN)
    expect(low).toBeCloseTo(row.vmin, 10)
    expect(high).toBeCloseTo(row.vmax, 10)
  })

  it('of nothing finite are NaN', () => {
    expect(percentileInterval([], 99)).toEqual({ low: Number.NaN, high: Number.NaN })
  })
})

describe('the min-max interval', () => {
  it('leaves out NaN and infinities', () => {
    const [low, high] = reference.minmax_finite
    expect(minMaxInterval(imageCalled('image_nan_inf'))).toEqual({ low, high })
    expect(minMaxInterval([Number.NaN])).toEqual({ low: Number.NaN, high: Number.NaN })
  })
})
