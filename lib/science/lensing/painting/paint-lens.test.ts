import { describe, expect, it } from 'vitest'
import { estimateNoise } from '@/lib/science/imaging/noise'
import { SeededRandom } from '../seeded-random'
import { simulateWithTruth } from '../simulate-candidate'
import { PAINTING, SCALE, galaxyPlanes, total, wcsOf } from './_painting-scene'
import { measureGalaxy, paint, paintLens, PaintingError } from './paint-lens'
import { USUAL_RANGES } from './painting-ranges'
import { pixelOf } from './sky-grid'

const painted = (seed: number, planes = galaxyPlanes(seed)) => {
  const galaxy = measureGalaxy(planes)
  const { planes: after, truth } = paint(planes, galaxy, PAINTING, new SeededRandom(seed))
  return { planes, galaxy, after, truth }
}

const added = (before: Float32Array, after: Float32Array) => after.map((value, i) => value - before[i])

describe('a lens painted over a galaxy', () => {
  it('adds the lensed flux that its truth tells, in every band', () => {
    const { planes, after, truth } = painted(3)
    expect(truth.bands.map(({ band }) => band)).toEqual(planes.map(({ band }) => band))
    after.forEach(({ data }, k) => {
      const sum = total(added(planes[k].data, data))
      expect(Math.abs(sum / truth.bands[k].lensedFlux - 1)).toBeLessThan(1e-3)
    })
  })

  it('has the signal-to-noise that was asked for in its best band, and less in the others', () => {
    const { planes, after, truth } = painted(4)
    const measured = after.map(({ data }, k) => {
      const { sigma } = estimateNoise(planes[k].data, planes[k].width, planes[k].height)
      return Math.sqrt(total(added(planes[k].data, data).map((value) => value * value))) / sigma
    })
    expect(Math.max(...measured)).toBeCloseTo(40, 1)
    truth.bands.forEach(({ signalToNoise }, k) => expect(measured[k]).toBeCloseTo(signalToNoise, 1))
  })

  it('is as blue as its source: magnitudes differ by the colour that was drawn', () => {
    const { truth } = painted(5)
    const magnitude = truth.bands.map(({ sourceFlux }) => -2.5 * Math.log10(sourceFlux))
    expect(magnitude[0] - magnitude[1]).toBeCloseTo(0.1, 6)
    expect(magnitude[1] - magnitude[2]).toBeCloseTo(0.1, 6)
    expect(truth.zeroPoints).toBe('taken as equal')
  })

  it('goes by the zero points of the headers where all have one', () => {
    const planes = galaxyPlanes(5).map((plane, k) => ({ ...plane, header: { MAGZERO: [30, 29, 28][k] } }))
    const { truth } = painted(5, planes)
    const magnitude = truth.bands.map(({ sourceFlux }, k) => [30, 29, 28][k] - 2.5 * Math.log10(sourceFlux))
    expect(truth.zeroPoints).toBe('header')
    expect(magnitude[0] - magnitude[1]).toBeCloseTo(0.1, 6)
  })

  it('leaves the noise of the sky as it is', () => {
    const { planes, after: afterwards } = painted(6)
    afterwards.forEach(({ data }, k) => {
      const { width, height } = planes[k]
      const [before, after] = [planes[k].data, data].map((pixels) => estimateNoise(pixels, width, height))
      expect(Math.abs(after.sigma / before.sigma - 1)).toBeLessThan(0.02)
      const corner = 5 * width + 5
      expect(Math.abs(data[corner] - planes[k].data[corner])).toBeLessThan(0.02 * before.sigma)
    })
  })

  // The variance of Poisson counts is their mean: light / gain in units of the pixels.
  it('gives painted light the noise of its photons where the gain is known, and none where it is not', () => {
    const plain = galaxyPlanes(7)
    const counted = plain.map((plane) => ({ ...plane, header: { GAIN: 0.5, BUNIT: 'adu' } }))
    const calibrated = plain.map((plane) => ({ ...plane, header: { GAIN: 0.5, BUNIT: 'nanomaggy' } }))
    const strong = { ...PAINTING, arcSignalToNoise: 400 }
    const galaxy = measureGalaxy(plain)
    const smooth = paint(plain, galaxy, strong, new SeededRandom(1))
    const noisy = paint(counted, galaxy, strong, new SeededRandom(1))
    expect(paint(calibrated, galaxy, strong, new SeededRandom(1)).planes[0].data).toEqual(smooth.planes[0].data)
    expect(noisy.truth.bands[0].electronsPerUnit).toBe(0.5)
    expect(smooth.truth.bands[0].electronsPerUnit).toBeNull()
    const light = added(plain[0].data, smooth.planes[0].data)
    const square = total(added(smooth.planes[0].data, noisy.planes[0].data).map((value) => value * value))
    expect(square / (total(light) / 0.5)).toBeGreaterThan(0.8)
    expect(square / (total(light) / 0.5)).toBeLessThan(1.2)
  })

  it('lies at the same place of the sky in bands that are turned, mirrored and of other pixels', () => {
    const [g, r, i] = galaxyPlanes(8)
    const finer = {
      ...i,
      wcs: wcsOf(80, 80, {
        matrix: [
          [SCALE / 7200, 0],
          [0, SCALE / 7200],
        ],
      }),
    }
    const galaxy = measureGalaxy([g, r, finer])
    const { planes, truth } = paint([g, r, finer], galaxy, PAINTING, new SeededRandom(8))
    const brightest = truth.images.reduce((best, image) =>
      Math.abs(image.magnification) > Math.abs(best.magnification) ? image : best,
    )
    ;[g, r, finer].forEach((plane, k) => {
      const light = added(plane.data, planes[k].data)
      const { x, y } = pixelOf(galaxy.grids[k], brightest.east, brightest.north)
      const there = light[Math.round(y) * plane.width + Math.round(x)]
      expect(there).toBeGreaterThan(0.5 * Math.max(...light))
    })
  })

  it('is the same for the same seed and another for another', () => {
    const planes = galaxyPlanes(9)
    const once = paintLens(planes, USUAL_RANGES, new SeededRandom(11))
    const again = paintLens(planes, USUAL_RANGES, new SeededRandom(11))
    expect(again).toEqual(once)
    expect(paintLens(planes, USUAL_RANGES, new SeededRandom(12)).truth).not.toEqual(once.truth)
  })

  it('keeps pixels without a value without one', () => {
    const planes = galaxyPlanes(10)
    planes[0].data[0] = Number.NaN
    expect(paintLens(planes, USUAL_RANGES, new SeededRandom(1)).planes[0].data[0]).toBeNaN()
  })

  it('draws within its ranges, the mass along the light', () => {
    const planes = galaxyPlanes(11)
    const galaxy = measureGalaxy(planes)
    for (let seed = 0; seed < 8; seed++) {
      const { truth } = paintLens(planes, USUAL_RANGES, new SeededRandom(seed))
      expect(truth.einsteinRadiusArcsec).toBeGreaterThanOrEqual(0.6)
      expect(truth.einsteinRadiusArcsec).toBeLessThan(2.5)
      expect(truth.arcSignalToNoise).toBeGreaterThanOrEqual(20)
      expect(truth.arcSignalToNoise).toBeLessThan(200)
      expect(Math.abs(truth.axisRatio - galaxy.axisRatio)).toBeLessThan(0.5)
    }
  })

  it('marks its arcs where the light is', () => {
    const { truth } = painted(12)
    expect(truth.arcs.length).toBeGreaterThan(0)
    const [brightest] = truth.arcs
    expect(brightest.brightness).toBe(1)
    const near = truth.images.some(({ east, north }) => {
      const angle = (Math.atan2(east, north) * 180) / Math.PI
      return Math.abs(((angle - brightest.positionAngleDeg + 540) % 360) - 180) < 40
    })
    expect(near).toBe(true)
    // The simulated galaxy stands within half a pixel of the middle.
    expect(Math.hypot(truth.middle.east, truth.middle.north)).toBeLessThan(0.2)
  })
})

describe('the galaxy that is painted over', () => {
  // The simulator's own truth: the galaxy's light without noise, whose moments tell the same axis.
  it('is measured along its light', () => {
    const planes = galaxyPlanes(21)
    const { positionAngleDeg, axisRatio } = measureGalaxy(planes)
    const { truth } = simulateWithTruth('elliptical', 21)
    const [angle, ratio] = momentsOf(truth[2].central, 80)
    expect(Math.abs(((positionAngleDeg - angle + 270) % 180) - 90)).toBeLessThan(12)
    expect(Math.abs(axisRatio - ratio)).toBeLessThan(0.15)
  })

  it('is refused where there is none, with a sentence', () => {
    const planes = galaxyPlanes(1).map((plane) => {
      const random = new SeededRandom(5)
      return { ...plane, data: plane.data.map(() => random.normal()) }
    })
    expect(() => measureGalaxy(planes)).toThrow(PaintingError)
    expect(() => measureGalaxy(planes)).toThrow('no galaxy in the middle')
  })

  it('is refused where it is a bright star, whose middle is saturated', () => {
    expect(() => measureGalaxy(galaxyPlanes(3, 'star-spikes'))).toThrow('saturated')
  })

  it('is refused without a scale, and in a cutout too small for the lens', () => {
    const planes = galaxyPlanes(2)
    expect(() => measureGalaxy(planes.map((plane) => ({ ...plane, wcs: null, pixelScaleArcsec: null })))).toThrow(
      'pixel scale of band g',
    )
    expect(() => measureGalaxy([{ ...planes[0], wcs: null }, planes[1]])).toThrow('Some of its bands')
    expect(() => paintLens(planes, { ...USUAL_RANGES, einsteinRadiusArcsec: [6, 7] }, new SeededRandom(1))).toThrow(
      'Einstein radii up to 5.1 arcsec only',
    )
  })
})

/** Position angle of the major axis (north up, east left) and axis ratio, by second moments within 10 pixels. */
function momentsOf(light: Float32Array, side: number): [number, number] {
  let [sum, xx, yy, xy] = [0, 0, 0, 0]
  const middle = (side - 1) / 2
  light.forEach((value, i) => {
    const [dx, dy] = [(i % side) - middle, Math.floor(i / side) - middle]
    if (Math.hypot(dx, dy) > 10) return
    sum += value
    xx += value * dx * dx
    yy += value * dy * dy
    xy += value * dx * dy
  })
  const spread = Math.hypot((xx - yy) / 2, xy) / sum
  const mean = (xx + yy) / 2 / sum
  const fromX = (Math.atan2(2 * xy, xx - yy) * 90) / Math.PI
  return [(((fromX - 90) % 180) + 180) % 180, Math.sqrt((mean - spread) / (mean + spread))]
}
