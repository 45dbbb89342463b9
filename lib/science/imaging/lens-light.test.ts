import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { sersicBrightness } from '@/lib/science/lensing/sersic'
import { simulateWithTruth, type SimulatedKind } from '@/lib/science/lensing/simulate-candidate'
import { blurredScene, recordCutout } from '@/lib/science/lensing/simulator/observe-scene'
import { Scene } from '@/lib/science/lensing/simulator/scene'
import { SALTMARSH_WIDE_SURVEY } from '@/lib/science/lensing/survey-model'
import { subtractLensLight } from './lens-light'
import type { BandPlane } from './normalise-planes'

const SURVEY = SALTMARSH_WIDE_SURVEY
const SIDE = 80

interface Galaxy {
  index: number
  axisRatio: number
  positionAngleDeg: number
  x?: number
  y?: number
  ringRadius?: number
}

/** One galaxy of i = 19 and red colours in three bands, blurred and recorded; with a blue ring round it on request. */
function galaxy({ index, axisRatio, positionAngleDeg, x = 0.03, y = -0.05, ringRadius }: Galaxy, seed = 1) {
  const scene = new Scene(SURVEY)
  const profile = { effectiveRadiusArcsec: 0.9, index, axisRatio, positionAngleDeg, x, y }
  scene.add(sersicBrightness(profile), [21.4, 19.8, 19], { x, y, fine: 12, fineRadiusArcsec: 0.5 })
  if (ringRadius !== undefined) {
    const ring = (u: number, v: number) => Math.exp(-(((Math.hypot(u - x, v - y) - ringRadius) / 0.2) ** 2) / 2)
    scene.addScaled(ring, [21, 20.8, 20.7], { isLensed: true })
  }
  const random = new SeededRandom(seed)
  const truth = SURVEY.bands.map((_, k) => crop(blurredScene(scene, k, (layer) => !layer.isLensed)))
  const lensed = SURVEY.bands.map((_, k) => crop(blurredScene(scene, k, (layer) => layer.isLensed)))
  const planes = SURVEY.bands.map((band, k): BandPlane => {
    const canvas = blurredScene(scene, k, () => true)
    return { band: band.band, width: SIDE, height: SIDE, data: recordCutout(canvas, scene, band, random) }
  })
  return { planes, truth, lensed }
}

const crop = (canvas: Float64Array) =>
  Float64Array.from({ length: SIDE * SIDE }, (_, i) => canvas[(Math.floor(i / SIDE) + 12) * 104 + (i % SIDE) + 12])

/** Root mean square of the residual within a radius, in units of the noise of sky and photons. */
function roughness(
  residual: BandPlane,
  truth: ArrayLike<number>,
  bandIndex: number,
  reach: number,
  x = 39.5,
  y = 39.5,
) {
  const { skyNoise, electronsPerFlux } = SURVEY.bands[bandIndex]
  let squares = 0
  let count = 0
  residual.data.forEach((value, i) => {
    if (Math.hypot((i % SIDE) - x, Math.floor(i / SIDE) - y) > reach) return
    squares += value ** 2 / (skyNoise ** 2 + truth[i] / electronsPerFlux)
    count++
  })
  return Math.sqrt(squares / count)
}

/** Share of the lensed light that the model has not taken, where that light is above half the sky's noise. */
function kept(model: Float32Array, galaxyLight: ArrayLike<number>, lensed: ArrayLike<number>, noise: number) {
  let taken = 0
  let light = 0
  for (let i = 0; i < model.length; i++) {
    if (lensed[i] < 0.5 * noise) continue
    taken += model[i] - galaxyLight[i]
    light += lensed[i]
  }
  return 1 - taken / light
}

const median = (values: number[]) => values.toSorted((a, b) => a - b)[Math.floor(values.length / 2)]

function keptOfSimulated(kind: SimulatedKind, seeds: number): number[] {
  return Array.from({ length: seeds }, (_, k) => {
    const { candidate, truth } = simulateWithTruth(kind, 500 + k)
    const planes = candidate.bands.map(({ band, data }) => ({ band, width: SIDE, height: SIDE, data }))
    const { model } = subtractLensLight(planes)
    return kept(model?.light.g ?? new Float32Array(6400), truth[0].central, truth[0].lensed, SURVEY.bands[0].skyNoise)
  })
}

const FORMS: Galaxy[] = [
  { index: 4, axisRatio: 0.8, positionAngleDeg: 30 },
  { index: 4, axisRatio: 0.5, positionAngleDeg: 100 },
  { index: 1, axisRatio: 0.7, positionAngleDeg: 160 },
]

describe('a galaxy of Sersic form', () => {
  it.each(FORMS)('of index $index and axis ratio $axisRatio leaves nothing but noise', (form) => {
    const { planes, truth } = galaxy(form)
    const { residuals, note } = subtractLensLight(planes)
    expect(note).toBeNull()
    residuals.forEach((residual, k) => {
      expect(roughness(planes[k], truth[k], k, 4)).toBeGreaterThan(15)
      expect(roughness(residual, truth[k], k, 4)).toBeLessThan(2)
      expect(roughness(residual, truth[k], k, 25)).toBeLessThan(1.15)
    })
  })

  it('far from the middle of the cutout is found and taken off there', () => {
    const { planes, truth } = galaxy({ ...FORMS[0], x: 1.8, y: -1.4 })
    const { residuals, model } = subtractLensLight(planes)
    expect(model?.x).toBeCloseTo(39.5 + 9, 0)
    expect(model?.y).toBeCloseTo(39.5 - 7, 0)
    expect(roughness(residuals[2], truth[2], 2, 4, 48.5, 32.5)).toBeLessThan(2.2)
  })

  it('is described by its axis ratio, which seeing makes rounder, and its angle', () => {
    const { model } = subtractLensLight(galaxy(FORMS[1]).planes)
    expect(model?.axisRatio).toBeGreaterThan(0.48)
    expect(model?.axisRatio).toBeLessThan(0.65)
    // 100 degrees from +y towards -x is 190, or 10, from +x towards +y.
    expect(Math.abs((model?.angleDeg ?? 0) - 10)).toBeLessThan(4)
  })
})

describe('light from behind the lens', () => {
  it('stays in the picture: arcs lose less than 15 % and closed rings less than 30 %', () => {
    expect(median(keptOfSimulated('lens-arc', 9))).toBeGreaterThan(0.85)
    expect(median(keptOfSimulated('lens-ring', 9))).toBeGreaterThan(0.7)
  })

  it('stays when it is a perfect circle about the lens, which only its colour and its rise outwards give away', () => {
    const { planes, truth, lensed } = galaxy({ ...FORMS[0], x: 0, y: 0, ringRadius: 1.8 })
    const { model } = subtractLensLight(planes)
    for (const [k, band] of ['g', 'r', 'i'].entries()) {
      const share = kept(model?.light[band] ?? new Float32Array(6400), truth[k], lensed[k], SURVEY.bands[k].skyNoise)
      // In g the galaxy is faint and the ring bright; in i the other way round.
      expect(share).toBeGreaterThan(band === 'g' ? 0.9 : 0.55)
      expect(share).toBeLessThan(1.15)
    }
  })

  it('stays in one band alone, where there is no colour to go by', () => {
    const { planes, truth, lensed } = galaxy({ ...FORMS[0], x: 0, y: 0, ringRadius: 2.2 })
    const { model } = subtractLensLight([planes[0]])
    expect(kept(model?.light.g ?? new Float32Array(6400), truth[0], lensed[0], 1)).toBeGreaterThan(0.7)
  })
})

const rotated = (plane: BandPlane): BandPlane => ({
  ...plane,
  data: plane.data.map((_, i) => plane.data[(SIDE - 1 - (i % SIDE)) * SIDE + Math.floor(i / SIDE)]),
})

describe('the residual', () => {
  it('turns with the picture', () => {
    const { planes } = galaxy(FORMS[1])
    const straight = subtractLensLight(planes).residuals.map(rotated)
    const turned = subtractLensLight(planes.map(rotated)).residuals
    straight.forEach((residual, k) => {
      const squares = residual.data.reduce((sum, value, i) => sum + (value - turned[k].data[i]) ** 2, 0)
      expect(Math.sqrt(squares / residual.data.length) / SURVEY.bands[k].skyNoise).toBeLessThan(0.05)
    })
  })

  it.each([
    [1e-13, 0],
    [1e4, 0],
    [1, 500],
  ])('is the same in units of %s with a sky of %s', (factor, sky) => {
    const { planes } = galaxy(FORMS[0])
    const plain = subtractLensLight(planes).residuals[2].data
    const others = planes.map((plane) => ({ ...plane, data: plane.data.map((value) => value * factor + sky) }))
    const other = subtractLensLight(others).residuals[2].data
    const squares = plain.reduce((sum, value, i) => sum + ((other[i] - sky) / factor - value) ** 2, 0)
    expect(Math.sqrt(squares / plain.length)).toBeLessThan(0.2)
  })

  it('leaves the planes as they were, and gives the same twice', () => {
    const { planes } = galaxy(FORMS[0])
    const before = planes.map((plane) => plane.data.slice())
    const once = subtractLensLight(planes)
    planes.forEach((plane, k) => expect(plane.data).toEqual(before[k]))
    expect(subtractLensLight(planes)).toEqual(once)
  })
})

describe('what cannot be modelled', () => {
  it('is shown as it is when nothing bright stands in the middle', () => {
    const random = new SeededRandom(4)
    const empty = { band: 'g', width: 50, height: 50, data: Float32Array.from({ length: 2500 }, () => random.normal()) }
    const { residuals, model, note } = subtractLensLight([empty])
    expect(model).toBeNull()
    expect(residuals[0].data).toEqual(empty.data)
    expect(note).toBe('No galaxy in the middle that is bright enough to model: shown as it is.')
  })

  it('is without data where the core is saturated, and the note says in which bands', () => {
    const { planes } = galaxy(FORMS[0])
    const full = { ...planes[2], data: planes[2].data.map((value) => Math.min(value, 250)) }
    const { residuals, note } = subtractLensLight([planes[0], planes[1], full])
    expect(note).toContain('The core is saturated in i: no data there, drawn as flat grey.')
    expect(residuals[2].data[40 * SIDE + 40]).toBeNaN()
    expect(residuals[1].data[40 * SIDE + 40]).not.toBeNaN()
  })

  it('names a second galaxy as bright as the first, which is left in', () => {
    const one = galaxy(FORMS[0])
    const two = galaxy({ ...FORMS[0], x: 3.2, y: 0 }, 2)
    const both = one.planes.map((plane, k) => ({
      ...plane,
      data: plane.data.map((value, i) => value + two.planes[k].data[i]),
    }))
    const { residuals, note } = subtractLensLight(both)
    expect(note).toMatch(/A second bright object, 1[567] pixels from the centre, was left in\./)
    const at = 39 * SIDE + 55
    expect(residuals[2].data[at] / two.planes[2].data[at]).toBeGreaterThan(0.85)
  })

  it('keeps gaps as gaps and models the rest', () => {
    const { planes, truth } = galaxy(FORMS[0])
    const gappy = planes.map((plane) => ({ ...plane, data: plane.data.slice().fill(Number.NaN, 0, 30 * SIDE) }))
    const { residuals } = subtractLensLight(gappy)
    expect(residuals[2].data.subarray(0, 30 * SIDE).every(Number.isNaN)).toBe(true)
    expect(residuals[2].data.subarray(30 * SIDE).every(Number.isFinite)).toBe(true)
    expect(roughness(residuals[2], truth[2], 2, 4)).toBeLessThan(2)
  })

  it('names a band of another size, which comes back as it is', () => {
    const { planes } = galaxy(FORMS[0])
    const small = { band: 'z', width: 30, height: 30, data: planes[0].data.slice(0, 900) }
    const { residuals, note } = subtractLensLight([...planes, small])
    expect(residuals[3]).toBe(small)
    expect(note).toBe('Band z differs in size and is shown as it is.')
  })

  it('never makes it throw', () => {
    const value = fc.oneof(
      { weight: 6, arbitrary: fc.float({ min: -5, max: 50, noNaN: true }) },
      { weight: 1, arbitrary: fc.constantFrom(0, Number.NaN, Number.POSITIVE_INFINITY, 1e38, -1e38, 1e-40) },
    )
    const picture = fc.array(value, { minLength: 24 * 22, maxLength: 24 * 22 })
    fc.assert(
      fc.property(fc.array(picture, { minLength: 1, maxLength: 3 }), (pictures) => {
        const planes = pictures.map((data, k) => ({
          band: String(k),
          width: 24,
          height: 22,
          data: Float32Array.from(data),
        }))
        expect(subtractLensLight(planes).residuals.length).toBe(planes.length)
      }),
      { numRuns: 40 },
    )
    expect(subtractLensLight([])).toEqual({ residuals: [], model: null, note: null })
  })
})
