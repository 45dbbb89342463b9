import { describe, expect, it } from 'vitest'
import { estimateNoise } from '@/lib/science/imaging/statistics'
import { SeededRandom } from './seeded-random'
import { sersicBrightness } from './sersic'
import { sieImages } from './sie'
import { simulateCandidate, simulateWithTruth, SIMULATED_KINDS } from './simulate-candidate'
import { magnitudesOf } from './simulator/colours'
import { arcDifficulty } from './simulator/difficulty'
import { traced } from './simulator/lens-scenes'
import { blurredScene, recordCutout } from './simulator/observe-scene'
import { convolve, pointSpread, pointSpreadKernel } from './simulator/point-spread'
import { Scene } from './simulator/scene'
import { SALTMARSH_WIDE_SURVEY } from './survey-model'

const SURVEY = SALTMARSH_WIDE_SURVEY
const sum = (values: Float64Array) => values.reduce((total, value) => total + value, 0)

describe('a simulated candidate', () => {
  it.each(SIMULATED_KINDS)('%s has three finite bands of the survey and is the same for the same seed', (kind) => {
    const candidate = simulateCandidate(kind, 5)
    expect(candidate.bands.map(({ band }) => band)).toEqual(['g', 'r', 'i'])
    for (const { data } of candidate.bands) {
      expect(data.length).toBe(80 * 80)
      expect(data.every(Number.isFinite)).toBe(true)
    }
    expect(candidate).toMatchObject({ kind, width: 80, height: 80, pixelScaleArcsec: 0.2 })
    expect(candidate.isLens).toBe(kind.startsWith('lens-'))
    expect(candidate.einsteinRadiusArcsec !== null).toBe(candidate.isLens)
    expect(candidate.difficulty).toBeGreaterThanOrEqual(0)
    expect(candidate.difficulty).toBeLessThanOrEqual(1)
    expect(simulateCandidate(kind, 5)).toEqual(candidate)
    expect(simulateCandidate(kind, 6).bands[0].data).not.toEqual(candidate.bands[0].data)
  })

  it('has the sky noise of its survey', () => {
    for (let seed = 1; seed <= 3; seed++) {
      simulateCandidate('ring-galaxy', seed).bands.forEach(({ data }, k) => {
        const { background, sigma } = estimateNoise(data, 80, 80)
        expect(sigma / SURVEY.bands[k].skyNoise).toBeGreaterThan(0.9)
        expect(sigma / SURVEY.bands[k].skyNoise).toBeLessThan(1.15)
        expect(Math.abs(background) / SURVEY.bands[k].skyNoise).toBeLessThan(0.6)
      })
    }
  })

  it('is taken by other surveys, with their bands, pixels and size', () => {
    const survey = { ...SURVEY, bands: SURVEY.bands.slice(0, 2), pixelScaleArcsec: 0.26, width: 50, height: 60 }
    const candidate = simulateCandidate('lens-arc', 1, survey)
    expect(candidate.bands.map(({ band, data }) => [band, data.length])).toEqual([
      ['g', 3000],
      ['r', 3000],
    ])
    expect(candidate).toMatchObject({ width: 50, height: 60, pixelScaleArcsec: 0.26 })
  })

  it('of a lens spans easy and hard', () => {
    const difficulties = Array.from({ length: 24 }, (_, k) => simulateCandidate('lens-arc', k + 1).difficulty)
    expect(Math.min(...difficulties)).toBeLessThan(0.25)
    expect(Math.max(...difficulties)).toBeGreaterThan(0.6)
  })
})

const LENS = { einsteinRadiusArcsec: 1.4, axisRatio: 0.75, positionAngleDeg: 50 }
const NO_SHEAR = { gamma1: 0, gamma2: 0 }

describe('ray tracing', () => {
  // Gravitational lensing conserves surface brightness (Schneider, Ehlers & Falco 1992, section 5.2).
  it('shows the brightness of the source at each of its images', () => {
    const centre = { effectiveRadiusArcsec: 0.1, index: 1, axisRatio: 1, positionAngleDeg: 0, x: 0.06, y: -0.04 }
    const source = sersicBrightness(centre)
    const image = traced(source, [LENS], NO_SHEAR, 0, 0)
    const images = sieImages(LENS, { east: centre.x, north: centre.y })
    expect(images.length).toBe(4)
    for (const { east, north } of images) expect(image(east, north) / source(centre.x, centre.y)).toBeCloseTo(1, 6)
  })

  // A small source behind a sphere: magnification 2 theta_E / beta (Narayan & Bartelmann, arXiv:astro-ph/9606001).
  it('magnifies a small source by what the point-source formula says', () => {
    const source = sersicBrightness({
      effectiveRadiusArcsec: 0.02,
      index: 1,
      axisRatio: 1,
      positionAngleDeg: 0,
      x: 0.5,
      y: 0,
    })
    const sphere = { einsteinRadiusArcsec: 1, axisRatio: 1, positionAngleDeg: 0 }
    const image = traced(source, [sphere], NO_SHEAR, 0, 0)
    const step = 0.005
    let light = 0
    for (let y = -2; y < 2; y += step) for (let x = -2; x < 2; x += step) light += image(x, y) * step * step
    expect(light).toBeCloseTo(2 / 0.5, 1)
  })

  it('stretches by a shear alone as 1 / (1 - gamma^2)', () => {
    const source = sersicBrightness({
      effectiveRadiusArcsec: 0.2,
      index: 1,
      axisRatio: 1,
      positionAngleDeg: 0,
      x: 0,
      y: 0,
    })
    const image = traced(source, [], { gamma1: 0.2, gamma2: 0.1 }, 0, 0)
    let light = 0
    for (let y = -3; y < 3; y += 0.02) for (let x = -3; x < 3; x += 0.02) light += image(x, y) * 0.0004
    expect(light).toBeCloseTo(1 / (1 - 0.05), 2)
  })
})

describe('observing', () => {
  const galaxy = { effectiveRadiusArcsec: 0.5, index: 1, axisRatio: 0.7, positionAngleDeg: 20, x: 0.3, y: 0.2 }

  // An AB magnitude of 20 at zero point 30 is a flux of 10^4.
  it('keeps the flux of a galaxy through sampling and seeing', () => {
    const scene = new Scene(SURVEY)
    scene.add(sersicBrightness(galaxy), [20, 20, 20], { x: 0.3, y: 0.2 })
    expect(sum(scene.layers[0].image)).toBeCloseTo(1, 2)
    expect(sum(blurredScene(scene, 1, () => true)) / 1e4).toBeCloseTo(1, 2)
  })

  it('gives a point the full width at half maximum of the seeing', () => {
    for (const band of [...SURVEY.bands, { ...SURVEY.bands[0], moffatBeta: Number.POSITIVE_INFINITY }]) {
      const profile = pointSpread(band)
      expect(profile(band.seeingArcsec / 2) / profile(0)).toBeCloseTo(0.5, 12)
      expect(sum(pointSpreadKernel(band, 0.2).values)).toBeCloseTo(1, 12)
    }
  })

  it('convolves a single pixel into the kernel, cut at the edges', () => {
    const kernel = pointSpreadKernel(SURVEY.bands[0], 0.2, 3)
    const image = new Float64Array(9 * 11)
    image[1 * 9 + 4] = 2
    const blurred = convolve(image, 9, 11, kernel)
    expect(blurred[1 * 9 + 4]).toBeCloseTo(2 * kernel.values[24], 12)
    expect(blurred[3 * 9 + 5]).toBeCloseTo(2 * kernel.values[5 * 7 + 4], 12)
    expect(blurred[0 * 9 + 4]).toBeCloseTo(2 * kernel.values[2 * 7 + 3], 12)
    expect(blurred[8 * 9 + 4]).toBe(0)
  })

  it('adds photon noise where there is light', () => {
    const scene = new Scene(SURVEY)
    const band = SURVEY.bands[1]
    const scatter = (level: number) => {
      const canvas = new Float64Array(scene.width * scene.height).fill(level)
      return estimateNoise(recordCutout(canvas, scene, band, new SeededRandom(9)), 80, 80).sigma
    }
    expect(scatter(0) / band.skyNoise).toBeCloseTo(1, 1)
    expect(scatter(1000) / Math.sqrt(band.skyNoise ** 2 + 1000 / band.electronsPerFlux)).toBeCloseTo(1, 1)
  })

  it('calls the same arc harder the fainter it is and the brighter the galaxy before it', () => {
    const difficulty = (arc: number, lens: number) => {
      const scene = new Scene(SURVEY)
      scene.add(
        sersicBrightness({ ...galaxy, x: 0, y: 0 }),
        magnitudesOf(SURVEY, lens, { gMinusR: 1.5, rMinusI: 0.6 }),
        {},
      )
      scene.add(sersicBrightness({ ...galaxy, x: 1.2 }), [arc, arc, arc], { isLensed: true })
      return arcDifficulty(scene)
    }
    expect(difficulty(25, 19)).toBeGreaterThan(difficulty(24, 19))
    expect(difficulty(24, 17)).toBeGreaterThan(difficulty(24, 19))
    expect(difficulty(29, 17)).toBe(1)
    expect(difficulty(19, 22)).toBe(0)
  })
})

describe('the truth of a simulated candidate', () => {
  it('belongs to the very pixels of the candidate, and is what is left of them without noise', () => {
    const { candidate, truth } = simulateWithTruth('lens-arc', 7)
    expect(candidate).toEqual(simulateCandidate('lens-arc', 7))
    truth.forEach(({ band, central, lensed, others }, k) => {
      const { data } = candidate.bands[k]
      const { skyNoise, electronsPerFlux } = SURVEY.bands[k]
      expect(band).toBe(candidate.bands[k].band)
      let squares = 0
      for (let i = 0; i < data.length; i++) {
        const light = central[i] + lensed[i] + others[i]
        squares += (data[i] - light) ** 2 / (skyNoise ** 2 + Math.max(0, light) / electronsPerFlux)
      }
      // Mean of 6400 squares of a unit normal: 1 within 5 standard errors of (2 / 6400)^(1/2).
      expect(Math.abs(squares / data.length - 1)).toBeLessThan(0.09)
    })
  })

  it('has lensed light in lenses only', () => {
    const most = (kind: 'lens-ring' | 'ring-galaxy') => Math.max(...simulateWithTruth(kind, 3).truth[0].lensed)
    expect(most('lens-ring')).toBeGreaterThan(1)
    expect(most('ring-galaxy')).toBe(0)
  })
})
